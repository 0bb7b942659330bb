import { readFileSync } from 'node:fs';
import { setTimeout as sleep } from 'node:timers/promises';
import { z } from 'zod';
import type { BodyOf, Endpoint, ParamsOf, QueryOf, ReplyOf } from '#contract/endpoint.ts';
import { Problem } from '#contract/errors.ts';
import { listCalibrations } from '#contract/models.ts';
import {
  applyFix,
  createPortfolio,
  getEdition,
  listMessages,
  listPortfolios,
  mapColumns,
  sealEdition,
  uploadFile,
  type Edition,
  type Portfolio,
} from '#contract/portfolios.ts';
import { acceptQuote, createQuote, getRun, listRuns } from '#contract/runs.ts';
import { createScenario, listScenarios, readTrack } from '#contract/scenarios.ts';
import { acceptNotes, signIn, type Session } from '#contract/session.ts';

/**
 * Gives the demonstration organisation something to look at, through the API like anybody else: two location files, three
 * storms and one finished run. Repeating it is safe: what is there stays, what is missing is added.
 *
 *   PORT=3000 DEMO_PASSWORD=… node --import tsx api/bin/demo.ts
 *
 * Ends with 0 when everything is there, 1 when something stopped it (said on standard error).
 */
const { PORT, DEMO_PASSWORD } = z
  .object({ PORT: z.coerce.number().int(), DEMO_PASSWORD: z.string().min(1) })
  .parse(process.env);

// The modeler alone, so that the other demonstration people still meet the standing notes at their first sign-in.
const PERSON = { email: 'teodor.brask@saltmarsh.example', name: 'Teodor Brask' };
const AS_AT = '2026-11-30';
const BOOKS = [
  { name: 'North-eastern Gulf book', currency: 'USD', file: 'saltmarsh-gulf-coast.csv', seal: true },
  { name: 'Coral Coast book', currency: 'AUD', file: 'saltmarsh-coral-coast.csv', seal: false },
];
const STORMS = [
  { name: 'Varrow, as tracked', file: 'varrow-as-tracked.csv', about: 'Landfall on the north-eastern Gulf coast' },
  { name: 'Quillon, as tracked', file: 'quillon-as-tracked.csv', about: 'Landfall on the Coral Coast' },
  { name: 'Meridane, as tracked', file: 'meridane-as-tracked.csv', about: 'Crosses 180 degrees at sea' },
];
const CHECK_LIMIT_MS = 5 * 60_000;
const RUN_LIMIT_MS = 15 * 60_000;

type Request<E extends Endpoint> = {
  params?: ParamsOf<E>;
  query?: Partial<NonNullable<QueryOf<E>>>;
  body?: BodyOf<E> | FormData;
  key?: string;
};

const cookies = new Map<string, string>();
let csrfToken = '';

async function call<E extends Endpoint>(endpoint: E, request: Request<E> = {}): Promise<ReplyOf<E>> {
  const params = (request.params ?? {}) as Record<string, string>;
  const path = endpoint.path.replace(/:(\w+)/g, (_all, name: string) => encodeURIComponent(String(params[name])));
  const query = new URLSearchParams(
    Object.entries(request.query ?? {}).map(([name, value]): [string, string] => [name, String(value)]),
  );
  const isForm = request.body instanceof FormData;
  const reply = await fetch(`http://127.0.0.1:${PORT}/api/v1${path}${query.size > 0 ? `?${query}` : ''}`, {
    method: endpoint.method.toUpperCase(),
    headers: {
      cookie: [...cookies].map(([name, value]) => `${name}=${value}`).join('; '),
      'x-csrf-token': csrfToken,
      ...(request.key && { 'idempotency-key': request.key }),
      ...(request.body !== undefined && !isForm && { 'content-type': 'application/json' }),
    },
    body: request.body === undefined ? undefined : isForm ? (request.body as FormData) : JSON.stringify(request.body),
  });
  for (const cookie of reply.headers.getSetCookie()) {
    const [pair] = cookie.split(';');
    const at = pair!.indexOf('=');
    cookies.set(pair!.slice(0, at), pair!.slice(at + 1));
  }
  const text = await reply.text();
  if (!reply.ok) {
    const problem = Problem.safeParse(text === '' ? null : JSON.parse(text));
    const said = problem.success
      ? [problem.data.detail, ...problem.data.faults.map(({ message }) => message)].join(' ')
      : `${reply.status}`;
    throw new Error(`${endpoint.summary}: ${said}`);
  }
  return endpoint.response.parse(text === '' ? null : JSON.parse(text)) as ReplyOf<E>;
}

const say = (words: string) => console.log(`Demonstration: ${words}`);
const fileOf = (name: string) => readFileSync(new URL(`../../seeds/demo-files/${name}`, import.meta.url));

const until = async <T>(
  limitMs: number,
  what: string,
  ask: () => Promise<T>,
  done: (state: T) => boolean,
): Promise<T> => {
  for (const deadline = Date.now() + limitMs; ;) {
    const state = await ask();
    if (done(state)) return state;
    if (Date.now() > deadline) throw new Error(`${what} took longer than ${limitMs / 60_000} minutes`);
    await sleep(500);
  }
};

const enter = async (): Promise<void> => {
  const use = (session: Session) => {
    csrfToken = session.csrfToken;
    return session;
  };
  const session = use(await call(signIn, { body: { email: PERSON.email, password: DEMO_PASSWORD } }));
  if (session.acceptanceRequired !== null) {
    use(await call(acceptNotes, { body: { version: session.acceptanceRequired, name: PERSON.name } }));
  }
};

const checked = async (editionId: string): Promise<Edition> => {
  const edition = await until(
    CHECK_LIMIT_MS,
    'Checking the location file',
    () => call(getEdition, { params: { editionId } }),
    ({ state, problem }) => state !== 'checking' || problem !== null,
  );
  if (edition.state === 'checked' || edition.state === 'sealed') return edition;
  throw new Error(`The location file wasn’t checked: ${edition.problem ?? edition.state}`);
};

/** The draft of a portfolio, uploaded and mapped by the suggestions. */
const draftOf = async (portfolio: Portfolio, { file, currency }: (typeof BOOKS)[number]): Promise<Edition> => {
  const form = new FormData();
  form.append('file', new Blob([fileOf(file)], { type: 'text/csv' }), file);
  const params = { portfolioId: portfolio.id };
  let edition = portfolio.draft
    ? await call(getEdition, { params: { editionId: portfolio.draft.id } })
    : await call(uploadFile, { params, body: form });
  if (edition.state === 'mapping') {
    edition = await call(mapColumns, {
      params: { editionId: edition.id },
      body: {
        columns: edition.columns.flatMap(({ index, suggestion }) =>
          suggestion ? [{ index, field: suggestion.field }] : [],
        ),
        currency,
        expectedRows: null,
        expectedTivMinor: null,
      } as BodyOf<typeof mapColumns>,
    });
  }
  return checked(edition.id);
};

/** Puts right what has one clear cause, and seals; the rest stays held and listed. */
const sealed = async (editionId: string): Promise<void> => {
  const params = { editionId };
  const { groups } = await call(listMessages, { params });
  for (const { code, fix } of groups) {
    if (fix?.kind !== 'swap_coordinates' && fix?.kind !== 'negate_longitude') continue;
    const reason = 'The pattern is the same in every row of the group';
    await call(applyFix, { params, body: { code, kind: fix.kind, reason } });
    await checked(editionId);
  }
  await call(sealEdition, {
    params,
    body: { asAt: AS_AT, heldReason: 'Asked back from the broker; not scored until answered', controlReason: null },
  });
};

const bringBooks = async (): Promise<void> => {
  for (const book of BOOKS) {
    const { items } = await call(listPortfolios, { query: { limit: 100 } });
    const portfolio =
      items.find(({ name }) => name === book.name) ??
      (await call(createPortfolio, { body: { name: book.name, currency: book.currency }, key: `demo-${book.file}` }));
    if (portfolio.current) continue;
    const draft = await draftOf(portfolio, book);
    if (book.seal) await sealed(draft.id);
    say(`${book.name} is ${book.seal ? 'sealed' : 'checked, for you to seal'}.`);
  }
};

const bringStorms = async (): Promise<void> => {
  const { items } = await call(listScenarios, { query: { limit: 100 } });
  for (const { name, file, about } of STORMS.filter((storm) => !items.some((item) => item.name === storm.name))) {
    const body = { format: 'track-csv' as const, text: fileOf(file).toString('utf8'), sortByTime: false };
    const { fixes, windAveragingS } = await call(readTrack, { body });
    if (windAveragingS === null) throw new Error(`${file} doesn’t say how long its winds were averaged`);
    const declarations = { windAveragingS, source: 'Invented for the demonstration', asOf: null };
    await call(createScenario, {
      body: { name, description: about, track: { fixes, declarations }, sortByTime: false },
      key: `demo-${file}`,
    });
    say(`${name} is saved.`);
  }
};

const bringRun = async (): Promise<void> => {
  const { items: portfolios } = await call(listPortfolios, { query: { limit: 100 } });
  const { items: scenarios } = await call(listScenarios, { query: { limit: 100 } });
  const { items: calibrations } = await call(listCalibrations);
  const edition = portfolios.find(({ name }) => name === BOOKS[0]!.name)?.current;
  const scenario = scenarios.find(({ name }) => name === STORMS[0]!.name);
  const calibration = calibrations.find(({ state }) => state === 'signed');
  if (!edition || !scenario || !calibration) throw new Error('An edition, a storm or a signed calibration is missing');
  const quote = await call(createQuote, {
    body: {
      editionId: edition.id,
      scenarioVersionIds: [scenario.versionId],
      calibrationId: calibration.id,
      curveSetId: calibration.curveSetId,
      options: { mesovortices: true, intensity: 'pressure', anchor: 'auto', gustThresholdsMs: [40, 50] },
      purpose: 'exploratory',
      costCentre: '',
    },
  });
  const accepted = await call(acceptQuote, { params: { quoteId: quote.id }, key: `demo-${quote.id}` });
  await finished(accepted.id);
};

const finished = async (runId: string): Promise<void> => {
  say('the first run is working …');
  const run = await until(
    RUN_LIMIT_MS,
    'The run',
    () => call(getRun, { params: { runId } }),
    ({ state }) => state !== 'waiting' && state !== 'working',
  );
  if (run.state !== 'complete') throw new Error(`Run ${run.number} ended as ${run.state}`);
  say(`run ${run.number} is complete.`);
};

try {
  await enter();
  const { items: runs } = await call(listRuns, { query: { limit: 1 } });
  const [latest] = runs;
  if (!latest) {
    await bringBooks();
    await bringStorms();
    await bringRun();
  } else if (latest.state === 'waiting' || latest.state === 'working') {
    await finished(latest.id);
  }
} catch (error) {
  console.error(`The demonstration isn’t complete. ${(error as Error).message}`);
  process.exitCode = 1;
}
// Said outright: an open channel to the process that started this one would keep it alive.
process.exit();
