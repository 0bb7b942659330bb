import { z } from 'zod';
import { Currency, Day, Digest, Id, Instant, Minor, Notice, PageQuery, pageOf } from './common.ts';
import { endpoint } from './endpoint.ts';
import { READERS, UNDERWRITERS } from './roles.ts';

/** Fields of the location file that a column can be mapped to (PRACTICE names, ours). */
export const SiteField = z.enum([
  'site_ref',
  'site_label',
  'account_ref',
  'policy_ref',
  'latitude',
  'longitude',
  'location_quality',
  'street',
  'town',
  'region',
  'postcode',
  'country',
  'building_value',
  'other_structures_value',
  'contents_value',
  'time_element_value',
  'total_value',
  'currency',
  'construction',
  'occupancy',
  'year_built',
  'storeys',
  'terrain',
  'deductible_kind',
  'deductible_value',
  'site_limit',
  'line_of_business',
]);
export type SiteField = z.infer<typeof SiteField>;

export const LocationQuality = z.enum([
  'building',
  'parcel',
  'placed_by_hand',
  'street',
  'postcode',
  'town',
  'region',
  'unknown',
]);
export const Terrain = z.enum(['water_edge', 'open', 'suburban', 'wooded', 'dense_urban', 'unknown']);
/** Roughness length of each terrain class [m]; unknown is taken as open and marked assumed. */
export const TERRAIN_ROUGHNESS_M: Readonly<Record<z.infer<typeof Terrain>, number>> = {
  water_edge: 0.003,
  open: 0.03,
  suburban: 0.3,
  wooded: 0.5,
  dense_urban: 1.0,
  unknown: 0.03,
};
export const RowState = z.enum(['ready', 'notes', 'held', 'set_aside']);
export type RowState = z.infer<typeof RowState>;
export const Severity = z.enum(['stop', 'blocks_sealing', 'hold', 'note', 'set_aside']);
export type Severity = z.infer<typeof Severity>;
export const Confidence = z.enum(['sure', 'likely', 'guess']);

/** What a message of intake says about one row or about the file: seen, why, what to do. */
export const IntakeMessage = z.object({
  code: z.string().regex(/^(FILE|PLACE|VALUE|TERM|BLDG|SAME)-\d\d$/),
  severity: Severity,
  field: SiteField.nullable(),
  received: z.string().nullable(),
  text: z.string(),
});
export type IntakeMessage = z.infer<typeof IntakeMessage>;

export const Fix = z.enum(['swap_coordinates', 'negate_longitude', 'exclude', 'keep_all']);
export type Fix = z.infer<typeof Fix>;

export const MessageGroup = z.object({
  code: z.string(),
  severity: Severity,
  title: z.string(),
  rows: z.int(),
  tivMinor: Minor,
  /** The bulk fix on offer, with the words on its button; null where none exists yet. */
  fix: z.object({ kind: Fix, label: z.string() }).nullable(),
});
export type MessageGroup = z.infer<typeof MessageGroup>;

const StateCount = z.object({ rows: z.int(), tivMinor: Minor });
/** file rows = ready + notes + held + set aside, in rows and in TIV. */
export const Reconciliation = z.object({
  fileRows: z.int(),
  tivMinor: Minor,
  ready: StateCount,
  notes: StateCount,
  held: StateCount,
  setAside: StateCount,
});
export type Reconciliation = z.infer<typeof Reconciliation>;

export const Column = z.object({
  index: z.int(),
  name: z.string(),
  samples: z.array(z.string()),
  suggestion: z.object({ field: SiteField, confidence: Confidence }).nullable(),
  field: SiteField.nullable(),
});
export type Column = z.infer<typeof Column>;

export const EditionState = z.enum(['mapping', 'checking', 'checked', 'sealed']);

export const Edition = z.object({
  id: Id,
  portfolioId: Id,
  portfolioName: z.string(),
  number: z.int(),
  state: EditionState,
  currency: Currency,
  asAt: Day.nullable(),
  file: z.object({ name: z.string(), bytes: z.int(), digest: Digest, uploadedAt: Instant, uploadedBy: z.string() }),
  style: z.object({
    delimiter: z.string(),
    encoding: z.string(),
    headerRow: z.int(),
    /** Sign that parts the decimals, known once the rows are read. */
    decimal: z.enum(['point', 'comma']).optional(),
  }),
  columns: z.array(Column),
  /** Lines read so far and in all, while checking. */
  progress: z.object({ done: z.int(), total: z.int().nullable() }).nullable(),
  /** Why the last check stopped, when it did. */
  problem: z.string().nullable(),
  reconciliation: Reconciliation.nullable(),
  control: z.object({ expectedRows: z.int().nullable(), expectedTivMinor: Minor.nullable() }),
  /** Share of scored TIV per location quality class, and resting on assumptions per attribute (0–1). */
  quality: z.array(z.object({ quality: LocationQuality, sites: z.int(), tivMinor: Minor })),
  assumptions: z.array(z.object({ attribute: z.string(), sites: z.int(), tivMinor: Minor })),
  assumedTivMinor: Minor,
  /** File-level messages (FILE-06 and the like). */
  messages: z.array(IntakeMessage),
  fixes: z.array(
    z.object({ id: Id, kind: Fix, code: z.string(), rows: z.int(), reason: z.string(), by: z.string(), at: Instant }),
  ),
  heldReason: z.string().nullable(),
  /** Why control totals that don't tie were accepted. */
  controlReason: z.string().nullable().optional(),
  sealedAt: Instant.nullable(),
  sealedBy: z.string().nullable(),
  digest: Digest.nullable(),
  notices: z.array(Notice),
});
export type Edition = z.infer<typeof Edition>;

export const EditionSummary = Edition.pick({
  id: true,
  number: true,
  state: true,
  asAt: true,
  reconciliation: true,
}).extend({
  updatedAt: Instant,
});

export const Portfolio = z.object({
  id: Id,
  name: z.string(),
  currency: Currency,
  createdAt: Instant,
  current: EditionSummary.nullable(),
  draft: EditionSummary.nullable(),
  editions: z.array(EditionSummary),
});
export type Portfolio = z.infer<typeof Portfolio>;

export const NewPortfolio = z.object({
  name: z.string().trim().min(1, 'Give the portfolio a name, for example the account reference.').max(120),
  currency: Currency,
});

export const Mapping = z.object({
  columns: z.array(z.object({ index: z.int().min(0), field: SiteField })).max(200),
  currency: Currency,
  expectedRows: z.int().min(0).nullable().default(null),
  expectedTivMinor: Minor.min(0).nullable().default(null),
  /** Answer to FILE-03; null lets the cells decide where they can be read one way only. */
  decimal: z.enum(['point', 'comma']).nullable().default(null),
  /** Answer to FILE-05; nothing is multiplied unless a person says that the amounts stand in thousands. */
  valuesIn: z.enum(['units', 'thousands']).nullable().default(null),
});
export type Mapping = z.infer<typeof Mapping>;

/** One line of the file as the checks see it. `row` is the line's number in the file, its first line being 1. */
export const IntakeRow = z.object({
  row: z.int(),
  state: RowState,
  siteRef: z.string().nullable(),
  tivMinor: Minor,
  received: z.record(z.string(), z.string()),
  latitude: z.number().nullable(),
  longitude: z.number().nullable(),
  messages: z.array(IntakeMessage),
  corrected: z.boolean(),
});
export type IntakeRow = z.infer<typeof IntakeRow>;

export const FixRequest = z.object({
  code: z.string(),
  kind: Fix,
  /** File rows; left out means every row with that message. */
  rows: z.array(z.int()).max(250_000).optional(),
  reason: z.string().trim().min(3, 'Say in a few words why; it is listed on the readiness sheet.').max(300),
});

export const SealRequest = z.object({
  asAt: Day,
  /** Needed when rows are held: they stay listed and unscored. */
  heldReason: z.string().trim().max(300).nullable().default(null),
  /** Needed when control totals don't tie. */
  controlReason: z.string().trim().max(300).nullable().default(null),
});

/** Columnar points for the map: one entry a row with coordinates. */
export const SitePoints = z.object({
  /** Number of the site in the edition, or that it will have; 0 for rows that aren't scored. */
  siteNo: z.array(z.int()),
  row: z.array(z.int()),
  ref: z.array(z.string()),
  latitude: z.array(z.number()),
  longitude: z.array(z.number()),
  tivMinor: z.array(Minor),
  state: z.array(RowState),
});
export type SitePoints = z.infer<typeof SitePoints>;

const PortfolioParams = z.object({ portfolioId: Id });
const EditionParams = z.object({ editionId: Id });

export const listPortfolios = endpoint({
  id: 'listPortfolios',
  method: 'get',
  path: '/portfolios',
  summary: 'Portfolios with their current edition and draft',
  access: READERS,
  query: PageQuery,
  response: pageOf(Portfolio),
  status: 200,
});
export const createPortfolio = endpoint({
  id: 'createPortfolio',
  method: 'post',
  path: '/portfolios',
  summary: 'Create a portfolio',
  access: UNDERWRITERS,
  idempotent: true,
  body: NewPortfolio,
  response: Portfolio,
  status: 201,
});
export const getPortfolio = endpoint({
  id: 'getPortfolio',
  method: 'get',
  path: '/portfolios/:portfolioId',
  summary: 'One portfolio with its editions',
  access: READERS,
  params: PortfolioParams,
  response: Portfolio,
  status: 200,
});
export const uploadFile = endpoint({
  id: 'uploadFile',
  method: 'post',
  path: '/portfolios/:portfolioId/files',
  summary: 'Upload a location file (form field "file"); starts a draft edition with suggested columns',
  access: UNDERWRITERS,
  upload: 'multipart',
  params: PortfolioParams,
  response: Edition,
  status: 201,
});
export const getEdition = endpoint({
  id: 'getEdition',
  method: 'get',
  path: '/editions/:editionId',
  summary: 'An edition: columns, states, readiness, seal',
  access: READERS,
  params: EditionParams,
  response: Edition,
  status: 200,
});
export const mapColumns = endpoint({
  id: 'mapColumns',
  method: 'put',
  path: '/editions/:editionId/mapping',
  summary: 'Set which column is which field and start the checks',
  access: UNDERWRITERS,
  params: EditionParams,
  body: Mapping,
  response: Edition,
  status: 202,
});
export const listMessages = endpoint({
  id: 'listMessages',
  method: 'get',
  path: '/editions/:editionId/messages',
  summary: 'Messages grouped by kind with counts and TIV',
  access: READERS,
  params: EditionParams,
  response: z.object({ groups: z.array(MessageGroup) }),
  status: 200,
});
export const listRows = endpoint({
  id: 'listRows',
  method: 'get',
  path: '/editions/:editionId/rows',
  summary: 'File rows with their state and messages',
  access: READERS,
  params: EditionParams,
  query: PageQuery.extend({ state: RowState.optional(), code: z.string().max(12).optional() }),
  response: pageOf(IntakeRow),
  status: 200,
});
export const getSitePoints = endpoint({
  id: 'getSitePoints',
  method: 'get',
  path: '/editions/:editionId/points',
  summary: 'Coordinates of the rows, for the map',
  access: READERS,
  params: EditionParams,
  response: SitePoints,
  status: 200,
});
export const applyFix = endpoint({
  id: 'applyFix',
  method: 'post',
  path: '/editions/:editionId/fixes',
  summary: 'Apply one fix to the rows of a message; undoable until sealing',
  access: UNDERWRITERS,
  params: EditionParams,
  body: FixRequest,
  response: Edition,
  status: 201,
});
export const undoFix = endpoint({
  id: 'undoFix',
  method: 'delete',
  path: '/editions/:editionId/fixes/last',
  summary: 'Undo the last fix',
  access: UNDERWRITERS,
  params: EditionParams,
  response: Edition,
  status: 200,
});
export const sealEdition = endpoint({
  id: 'sealEdition',
  method: 'post',
  path: '/editions/:editionId/seal',
  summary: 'Seal the edition: immutable from now on, with a digest',
  access: UNDERWRITERS,
  params: EditionParams,
  body: SealRequest,
  response: Edition,
  status: 200,
});
