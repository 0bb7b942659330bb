import { useState } from 'react';
import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { MemoryRouter } from 'react-router-dom';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import { ChecksStep } from '../../web/features/portfolios/components/checks-step.tsx';
import { FileQuestions } from '../../web/features/portfolios/components/file-questions.tsx';
import { SealCard } from '../../web/features/portfolios/components/seal-card.tsx';
import { placeAfter } from '../../web/features/portfolios/fix-preview.ts';
import { intakeSteps, stepShown } from '../../web/features/portfolios/intake-steps.ts';
import { answerRequests, ok, refusal, type Asked } from '../helpers/web-answers.ts';
import { testEdition, testReconciliation } from '../helpers/web-edition.ts';

beforeEach(() => vi.unstubAllGlobals());

const edition = testEdition({ state: 'checked', reconciliation: testReconciliation });
const groups = [
  {
    code: 'PLACE-02',
    severity: 'hold',
    title: 'Latitude and longitude look swapped',
    rows: 2,
    tivMinor: 100_000_00,
    fix: { kind: 'swap_coordinates', label: 'Swap 2 rows' },
  },
  { code: 'BLDG-01', severity: 'note', title: 'Construction is missing', rows: 2, tivMinor: 200_000_00, fix: null },
];
const row = (number: number, code: string) => ({
  row: number,
  state: 'held',
  siteRef: `S-${number}`,
  tivMinor: 50_000_00,
  received: { latitude: '-81.25', longitude: '31.5' },
  latitude: null,
  longitude: null,
  messages: [{ code, severity: 'hold', field: 'latitude', received: '-81.25', text: `Row ${number} looks swapped.` }],
  corrected: false,
});

const answerChecks = ({ path, query, method }: Asked) => {
  if (path.endsWith('/messages')) return ok({ groups });
  if (path.endsWith('/rows'))
    return ok({ items: [row(27, query.get('code') ?? ''), row(31, query.get('code') ?? '')], nextCursor: null });
  if (method === 'POST') return ok(edition, 201);
  return refusal(404, 'not_found', 'Not here.');
};

const show = (canWrite?: boolean) => {
  const client = new QueryClient({ defaultOptions: { queries: { retry: false } } });
  const onChoose = vi.fn();
  function Screen() {
    const [chosen, setChosen] = useState<string | null>(null);
    return (
      <ChecksStep
        edition={edition}
        canWrite={canWrite ?? true}
        chosen={chosen}
        onChoose={(code) => {
          onChoose(code);
          setChosen(code);
        }}
      />
    );
  }
  render(
    <QueryClientProvider client={client}>
      <MemoryRouter>
        <Screen />
      </MemoryRouter>
    </QueryClientProvider>,
  );
  return onChoose;
};

describe('the checks', () => {
  it('preview the first fix: as received, struck through, then as it would become', async () => {
    answerRequests(answerChecks);
    show();
    const rows = within(await screen.findByRole('table', { name: 'Rows: Latitude and longitude look swapped' }));
    const cells = within((await rows.findByText('S-27')).closest('tr')!).getAllByRole('cell');
    expect(cells.map((cell) => cell.textContent)).toEqual(['27', 'S-27', '−81.25', '31.5', '', '31.5', '−81.25']);
  });

  it('ask for a reason before anything changes, then apply to the chosen rows', async () => {
    const asked = answerRequests(answerChecks);
    show();
    const user = userEvent.setup();
    await screen.findByText('S-27');
    await user.click(screen.getByRole('button', { name: 'Swap 2 rows' }));
    expect(screen.getByText('Say in a few words why.')).toBeVisible();
    expect(asked.some(({ method }) => method === 'POST')).toBe(false);
    await user.type(screen.getByLabelText('Reason'), 'Broker’s column order');
    await user.click(screen.getByRole('button', { name: 'Choose rows' }));
    await user.click(screen.getByRole('checkbox', { name: 'Row 31' }));
    await user.click(screen.getByRole('button', { name: 'Swap 1 row' }));
    await waitFor(() => expect(asked.some(({ method }) => method === 'POST')).toBe(true));
    expect(asked.find(({ method }) => method === 'POST')?.body).toEqual({
      code: 'PLACE-02',
      kind: 'swap_coordinates',
      reason: 'Broker’s column order',
      rows: [27],
    });
  });

  it('are walked by j and k, and Enter goes into the preview', async () => {
    answerRequests(answerChecks);
    const onChoose = show();
    const user = userEvent.setup();
    (await screen.findByRole('button', { name: /look swapped/ })).focus();
    await user.keyboard('j');
    expect(onChoose).toHaveBeenLastCalledWith('BLDG-01');
    await user.keyboard('k');
    expect(onChoose).toHaveBeenLastCalledWith('PLACE-02');
  });

  it('say what failed, with the request’s number, and try again', async () => {
    let broken = true;
    answerRequests((asked) =>
      broken && asked.path.endsWith('/messages')
        ? refusal(500, 'internal', 'It broke on our side.')
        : answerChecks(asked),
    );
    show();
    expect(await screen.findByRole('alert')).toHaveTextContent('It broke on our side.Request req-1');
    broken = false;
    await userEvent.click(screen.getByRole('button', { name: 'Try again' }));
    expect(await screen.findByText('S-27')).toBeVisible();
  });
});

it('shows what a fix would make of a place', () => {
  const swapped = row(27, 'PLACE-02') as Parameters<typeof placeAfter>[0];
  expect(placeAfter(swapped, 'swap_coordinates')).toEqual({ latitude: '31.5', longitude: '-81.25' });
  const east = { ...swapped, received: { latitude: '25.8', longitude: '80.13' } };
  expect(placeAfter(east, 'negate_longitude')).toEqual({ latitude: '25.8', longitude: '−80.13' });
  expect(placeAfter(swapped, 'exclude')).toBeNull();
});

describe('the seal', () => {
  const seal = (changes: Parameters<typeof testEdition>[0] = {}) => {
    const onSealed = vi.fn();
    render(
      <QueryClientProvider client={new QueryClient()}>
        <SealCard
          edition={testEdition({ state: 'checked', reconciliation: testReconciliation, ...changes })}
          canWrite
          onSealed={onSealed}
        />
      </QueryClientProvider>,
    );
    return onSealed;
  };

  it('names what blocks it, one thing after the other, and opens with Ctrl-Enter', async () => {
    const asked = answerRequests(() => ok(testEdition({ state: 'sealed' })));
    const onSealed = seal();
    const user = userEvent.setup();
    const button = screen.getByRole('button', { name: 'Seal edition 3' });
    expect(button).toHaveAccessibleDescription('Tick that held rows aren’t scored.');
    await user.click(screen.getByRole('checkbox'));
    expect(button).toHaveAccessibleDescription('Say why rows stay held.');
    await user.type(screen.getByLabelText('Reason'), 'Broker answers on 12 Jan');
    expect(screen.getByText('Held rows ticked. Nothing blocks sealing.')).toBeVisible();
    await user.keyboard('{Control>}{Enter}{/Control}');
    await waitFor(() => expect(onSealed).toHaveBeenCalled());
    expect(asked[0]?.body).toMatchObject({ heldReason: 'Broker answers on 12 Jan', controlReason: null });
  });

  it('asks why when control totals differ', () => {
    seal({
      control: { expectedRows: 12, expectedTivMinor: null },
      messages: [
        { code: 'FILE-06', severity: 'blocks_sealing', field: null, received: null, text: 'Three rows are missing.' },
      ],
    });
    expect(screen.getByText('Expected 12 sites; read 9 sites.')).toBeVisible();
    expect(screen.getByRole('button', { name: 'Seal edition 3' })).toHaveAccessibleDescription(
      'Control totals differ: say why.',
    );
  });
});

describe('a question about the whole file', () => {
  const open = testEdition({
    state: 'checked',
    reconciliation: testReconciliation,
    columns: [{ index: 3, name: 'Bldg', samples: ['120'], suggestion: null, field: 'building_value' }],
    style: { delimiter: ',', encoding: 'utf-8', headerRow: 1, decimal: 'comma' },
    messages: [
      {
        code: 'FILE-05',
        severity: 'stop',
        field: null,
        received: null,
        text: 'Half of the building values are under 10,000 USD.',
      },
    ],
  });

  it('is answered by a person, keeping the mapping and the style already read', async () => {
    const asked = answerRequests(() => ok(open, 202));
    render(
      <QueryClientProvider client={new QueryClient()}>
        <FileQuestions edition={open} canWrite />
      </QueryClientProvider>,
    );
    await userEvent.click(screen.getByRole('button', { name: 'Yes, multiply by 1,000' }));
    await waitFor(() => expect(asked).toHaveLength(1));
    expect(asked[0]?.body).toMatchObject({
      columns: [{ index: 3, field: 'building_value' }],
      decimal: 'comma',
      valuesIn: 'thousands',
    });
  });

  it('blocks the seal until it is answered', () => {
    render(
      <QueryClientProvider client={new QueryClient()}>
        <SealCard edition={open} canWrite onSealed={() => undefined} />
      </QueryClientProvider>,
    );
    expect(screen.getByRole('button', { name: 'Seal edition 3' })).toHaveAccessibleDescription(
      'A question about the file is open. Answer it in the checks.',
    );
  });
});

describe('the steps', () => {
  it('fall back to where the draft stands', () => {
    expect(stepShown(testEdition(), 'readiness')).toBe('columns');
    expect(stepShown(testEdition({ state: 'checking' }), 'readiness')).toBe('checks');
    expect(stepShown(edition, 'readiness')).toBe('readiness');
    expect(stepShown(testEdition({ state: 'sealed' }), 'columns')).toBe('sites');
  });
  it('give each outcome in one line', () => {
    expect(intakeSteps(edition, 'checks').map(({ label, state, outcome }) => [label, state, outcome])).toEqual([
      ['Upload', 'done', 'lodging.csv, semicolon separated'],
      ['Columns', 'later', '6 columns found'],
      ['Checks', 'current', '1 held'],
      ['Readiness', 'later', 'seal edition 3'],
    ]);
  });
});
