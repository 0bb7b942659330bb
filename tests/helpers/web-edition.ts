import type { Column, Edition } from '#contract/portfolios.ts';

const column = (index: number, name: string, suggestion: Column['suggestion'], samples = ['a', 'b', 'c']): Column => ({
  index,
  name,
  samples,
  suggestion,
  field: null,
});

/** A small draft edition as the service describes it: 10 rows = 6 + 2 + 1 + 1. */
export const testEdition = (changes: Partial<Edition> = {}): Edition => ({
  id: '00000000-0000-4000-8000-000000000301',
  portfolioId: '00000000-0000-4000-8000-000000000100',
  portfolioName: 'Lodging 4471',
  number: 3,
  state: 'mapping',
  currency: 'USD',
  asAt: null,
  file: {
    name: 'lodging.csv',
    bytes: 4096,
    digest: 'ab12cd34'.repeat(8),
    uploadedAt: '2026-12-01T08:00:00.000Z',
    uploadedBy: 'Ines Halvard',
  },
  style: { delimiter: ';', encoding: 'utf-8', headerRow: 1 },
  columns: [
    column(0, 'LocRef', { field: 'site_ref', confidence: 'sure' }, ['S-1', 'S-2', 'S-3']),
    column(1, 'Lat', { field: 'latitude', confidence: 'sure' }, ['31.2', '31.3', '31.4']),
    column(2, 'Lon', { field: 'longitude', confidence: 'sure' }, ['-81.2', '-81.3', '-81.4']),
    column(3, 'Bldg', { field: 'building_value', confidence: 'sure' }, ['100', '200', '300']),
    column(4, 'Building RC', { field: 'building_value', confidence: 'guess' }, ['110', '210', '310']),
    column(5, 'Broker note', null, ['new roof', '', 'see mail']),
  ],
  progress: null,
  problem: null,
  reconciliation: null,
  control: { expectedRows: null, expectedTivMinor: null },
  quality: [],
  assumptions: [],
  assumedTivMinor: 0,
  messages: [],
  fixes: [],
  heldReason: null,
  sealedAt: null,
  sealedBy: null,
  digest: null,
  notices: [],
  ...changes,
});

export const testReconciliation = {
  fileRows: 10,
  tivMinor: 1_000_000_00,
  ready: { rows: 6, tivMinor: 700_000_00 },
  notes: { rows: 2, tivMinor: 200_000_00 },
  held: { rows: 1, tivMinor: 100_000_00 },
  setAside: { rows: 1, tivMinor: 0 },
};
