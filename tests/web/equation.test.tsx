import { render, screen, within } from '@testing-library/react';
import fc from 'fast-check';
import { expect, it } from 'vitest';
import type { IntakeMessage } from '#contract/portfolios.ts';
import { EquationCard } from '../../web/features/portfolios/components/equation-card.tsx';
import { controlVerdict, equationOf, tivSentence } from '../../web/features/portfolios/reconciliation.ts';
import { testEdition, testReconciliation } from '../helpers/web-edition.ts';

const checked = testEdition({ state: 'checked' });
// The service says whether totals tie, because it allows for rounding in the broker's total.
const untied: IntakeMessage = {
  code: 'FILE-06',
  severity: 'blocks_sealing',
  field: null,
  received: null,
  text: 'You told us to expect 10 sites.',
};

const numberIn = (text: string) => Number(text.replaceAll(',', ''));

it('adds up on screen: file rows = ready + with notes + held + set aside', () => {
  const part = fc.record({ rows: fc.nat(250_000), tivMinor: fc.nat(1e12) });
  fc.assert(
    fc.property(part, part, part, part, (ready, notes, held, setAside) => {
      const sum = {
        fileRows: ready.rows + notes.rows + held.rows + setAside.rows,
        tivMinor: ready.tivMinor + notes.tivMinor + held.tivMinor,
        ready,
        notes,
        held,
        setAside,
      };
      const { total, terms } = equationOf(sum, 'USD');
      const added = terms.reduce((rows, term) => rows + numberIn(term.value), 0);
      expect(added).toBe(numberIn(total.value));
    }),
  );
});

it('is drawn with its signs and says the shares in words', () => {
  render(
    <EquationCard
      reconciliation={testReconciliation}
      currency="USD"
      control={{ ...checked, control: { expectedRows: 9, expectedTivMinor: null } }}
    />,
  );
  const card = within(screen.getByRole('region', { name: 'Rows by state' }));
  expect(card.getByText('=')).toBeInTheDocument();
  expect(card.getAllByText('+')).toHaveLength(3);
  expect(card.getByText('By TIV: 70.0 % ready, 20.0 % with notes, 10.0 % held')).toBeVisible();
  expect(card.getByText('Ties with your control totals')).toBeVisible();
});

it('compares control totals with everything but the lines set aside', () => {
  const given = (expectedRows: number | null, expectedTivMinor: number | null, differing?: IntakeMessage) =>
    controlVerdict(testReconciliation, {
      ...checked,
      control: { expectedRows, expectedTivMinor },
      messages: differing ? [differing] : [],
    });
  expect(given(null, null).state).toBe('none');
  expect(given(9, 1_000_000_00).state).toBe('ties');
  expect(given(10, 1_000_000_00, untied).state).toBe('differs');
  expect(given(10, null, untied).sentence).toBe('Expected 10 sites; read 9 sites.');
});

it('speaks of no value rather than of 0 %', () => {
  const none = { rows: 3, tivMinor: 0 };
  expect(tivSentence({ fileRows: 12, tivMinor: 0, ready: none, notes: none, held: none, setAside: none }, 'USD')).toBe(
    'No value read in USD.',
  );
});
