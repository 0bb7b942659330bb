import { useState } from 'react';
import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { MemoryRouter } from 'react-router-dom';
import { describe, expect, it } from 'vitest';
import type { ResolvedFix } from '#contract/scenarios.ts';
import { FixGrid } from '../../web/features/scenarios/components/fix-grid.tsx';
import { parseTime } from '../../web/features/scenarios/fix-columns.ts';
import {
  emptyFix,
  missingFrom,
  trackOf,
  withFixAfter,
  withFixMoved,
  type TrackDraft,
} from '../../web/features/scenarios/track-draft.ts';
import { useDraft } from '../../web/features/scenarios/use-draft.ts';
import { UnitsProvider } from '../../web/lib/units.tsx';

const fixAt = (hour: number, maxWindMs: number | null) => ({
  ...emptyFix(),
  time: new Date(Date.UTC(2026, 8, 3, hour)).toISOString(),
  latitude: 30 + hour / 12,
  longitude: -50,
  maxWindMs,
  centralPressureHpa: 940,
});
const draft: TrackDraft = {
  fixes: [fixAt(0, 60), fixAt(6, 62.03), fixAt(12, null)],
  windAveragingS: 60,
  source: '',
  asOf: null,
  vortices: [],
};
const resolved = draft.fixes.map((fix) => ({
  ...fix,
  maxWindMs: fix.maxWindMs ?? 45.2,
  radiusOfMaxWindM: 33_000,
  headingDeg: 337,
  speedMs: 3.5,
  overLand: false,
  filled: { radiusOfMaxWindM: 'Vickery & Wadhera (2008), all hurricanes' },
})) as unknown as ResolvedFix[];

let latest: TrackDraft = draft;
function Grid({ unit }: { unit: string }) {
  const state = useDraft(draft);
  const [chosen, setChosen] = useState(0);
  latest = state.draft;
  return (
    <MemoryRouter initialEntries={[`/?unit=${unit}`]}>
      <UnitsProvider personId="p">
        <FixGrid
          fixes={state.draft.fixes}
          resolved={resolved}
          chosen={chosen}
          onChoose={setChosen}
          change={state.change}
          readOnly={false}
        />
        <button type="button" onClick={state.undo}>
          Undo
        </button>
      </UnitsProvider>
    </MemoryRouter>
  );
}
const cell = (row: number, column: number) => document.querySelector<HTMLElement>(`[data-cell="${row}:${column}"]`)!;
const show = async (unit = 'ms') => {
  render(<Grid unit={unit} />);
  const user = userEvent.setup();
  await user.click(cell(0, 0));
  return user;
};

describe('the fix grid', () => {
  it('moves by arrows, edits by F2 and takes the value at Enter, one row down', async () => {
    const user = await show();
    await user.keyboard('{ArrowRight}{ArrowRight}{ArrowRight}{ArrowDown}');
    expect(cell(1, 3)).toHaveFocus();
    await user.keyboard('{F2}');
    await user.clear(screen.getByRole('textbox'));
    await user.keyboard('58.5{Enter}');
    expect(latest.fixes[1]!.maxWindMs).toBe(58.5);
    expect(cell(2, 3)).toHaveFocus();
    await user.click(screen.getByRole('button', { name: 'Undo' }));
    expect(latest).toBe(draft);
  });

  it('goes on at Tab while typing, and gives up at Escape', async () => {
    const user = await show();
    cell(0, 3).focus();
    await user.keyboard('7');
    await user.keyboard('1{Tab}');
    expect(latest.fixes[0]!.maxWindMs).toBe(71);
    expect(cell(0, 4)).toHaveFocus();
    await user.keyboard('{F2}999{Escape}');
    expect(latest.fixes[0]!.centralPressureHpa).toBe(940);
    expect(cell(0, 4)).toHaveFocus();
  });

  it('keeps the stored digits when another unit only shows them', async () => {
    const user = await show('kt');
    // 62.03 m/s shows as 120.6 kt; looking into the cell must not store 62.04.
    cell(1, 3).focus();
    expect(cell(1, 3)).toHaveTextContent('120.6');
    await user.keyboard('{F2}{Enter}');
    expect(latest).toBe(draft);
    cell(0, 3).focus();
    await user.keyboard('{F2}');
    await user.clear(screen.getByRole('textbox'));
    await user.keyboard('100{Enter}');
    expect(latest.fixes[0]!.maxWindMs).toBeCloseTo((100 * 1852) / 3600, 10);
  });

  it('says what is wrong and keeps the cell open', async () => {
    const user = await show();
    cell(0, 1).focus();
    await user.keyboard('{F2}');
    await user.clear(screen.getByRole('textbox'));
    await user.keyboard('north{Enter}');
    expect(screen.getByRole('alert')).toHaveTextContent('“north” isn’t a number.');
    expect(screen.getByRole('textbox')).toHaveAttribute('aria-invalid', 'true');
    expect(latest).toBe(draft);
  });

  it('shows filled values with the word, and clears an entered one by Delete', async () => {
    const user = await show();
    expect(cell(0, 5)).toHaveTextContent('33 filled');
    expect(cell(2, 3)).toHaveTextContent('45.2 filled');
    cell(0, 3).focus();
    await user.keyboard('{Delete}');
    expect(latest.fixes[0]!.maxWindMs).toBeNull();
    cell(1, 0).focus();
    await user.keyboard('{Delete}');
    expect(latest.fixes[1]!.time).not.toBeNull();
  });

  it('fills down by Ctrl-D and nudges by Alt-arrows', async () => {
    const user = await show();
    cell(2, 3).focus();
    await user.keyboard('{Control>}d{/Control}');
    expect(latest.fixes[2]!.maxWindMs).toBe(62.03);
    await user.keyboard('{Alt>}{ArrowUp}{/Alt}');
    expect(latest.fixes[2]!.latitude).toBeCloseTo(31 + 1 / 111.195, 3);
  });
});

describe('the draft', () => {
  it('puts a new fix half-way, or one step on at the end', () => {
    const between = withFixAfter(draft, 0).fixes[1]!;
    expect(between).toMatchObject({
      time: '2026-09-03T03:00:00.000Z',
      latitude: 30.25,
      longitude: -50,
      maxWindMs: null,
    });
    expect(withFixAfter(draft, 2).fixes[3]!.time).toBe('2026-09-03T18:00:00.000Z');
  });
  it('moves a fix across the date line', () => {
    const near = { ...draft, fixes: [{ ...fixAt(0, 60), latitude: 0, longitude: 179.999 }] };
    expect(withFixMoved(near, 0, 0, 1).fixes[0]!.longitude).toBeCloseTo(-179.992, 3);
  });
  it('is no track before the averaging period is declared', () => {
    expect(trackOf({ ...draft, windAveragingS: null })).toBeNull();
    expect(missingFrom({ ...draft, windAveragingS: null })).toBe('Declare how long the winds were averaged.');
    expect(trackOf(draft)?.declarations.windAveragingS).toBe(60);
  });
  it('reads times in UTC and no impossible day', () => {
    expect(parseTime('2026-09-03 06:00')).toBe('2026-09-03T06:00:00.000Z');
    expect(parseTime('2026-02-30 06:00')).toBeNull();
    expect(parseTime('3 Sep')).toBeNull();
  });
});
