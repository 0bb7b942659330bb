import { render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { MemoryRouter } from 'react-router-dom';
import { describe, expect, it } from 'vitest';
import { NOTICE_VERSION } from '#contract/notices.ts';
import { UnitsProvider, useUnits } from '../../web/lib/units.tsx';
import { linearAxis, logAxis } from '../../web/ui/charts/axis.ts';
import { differenceToken, GUST_EDGES_MS, gustToken } from '../../web/ui/charts/gust-scale.ts';
import { ChartFrame } from '../../web/ui/charts/chart-frame.tsx';
import { binLabels, GustHistogram, stepOutline } from '../../web/ui/charts/gust-histogram.tsx';
import { GustLadder } from '../../web/ui/charts/gust-ladder.tsx';
import { RangeBar } from '../../web/ui/charts/range-bar.tsx';
import { landStretches } from '../../web/ui/charts/track-chart.tsx';

const millions = (value: number) => String(value);

describe('the range bar', () => {
  const axis = linearAxis(0, 500);
  it('says both marks in words', () => {
    render(<RangeBar axis={axis} enhanced={{ p5: 186, p50: 268, p95: 412 }} plain={226} format={millions} />);
    expect(screen.getByRole('img')).toHaveAccessibleName('enhanced 186 to 412, central 268; plain 226');
  });

  it('says that there is no vortex range when the layer is off', () => {
    render(<RangeBar size="headline" axis={axis} enhanced={null} plain={226} format={millions} />);
    expect(screen.getByRole('img')).toHaveAccessibleName('no vortex range: layer off; plain 226');
    expect(screen.getByText('no vortex range: layer off')).toBeVisible();
  });
});

describe('axes', () => {
  it('end on round values around the given ones', () => {
    expect(linearAxis(0, 412)).toMatchObject({ low: 0, high: 500, ticks: [0, 100, 200, 300, 400, 500] });
    expect(linearAxis(43.1, 57.7, 4).ticks).toEqual([40, 45, 50, 55, 60]);
  });
  it('give equal ratios equal lengths on a log axis', () => {
    const { at } = logAxis(12, 80_000);
    expect(at(200) - at(100)).toBeCloseTo(at(20_000) - at(10_000), 12);
  });
});

describe('the gust scale', () => {
  it('has fourteen steps, none below 20 m/s and the last one open', () => {
    expect(GUST_EDGES_MS).toHaveLength(14);
    expect(gustToken(19.99)).toBeNull();
    expect(gustToken(20)).toBe('--gust-20');
    expect(gustToken(59.999)).toBe('--gust-55');
    expect(gustToken(104)).toBe('--gust-85');
  });
  it('gives the step that holds zero the pale colour and mirrors the rest', () => {
    const levels = Array.from({ length: 11 }, (_, index) => -5.5 + index);
    expect(differenceToken(-0.5, levels)).toBe('--diff-6');
    expect(differenceToken(0.5, levels)).toBe('--diff-7');
    expect(differenceToken(-1.5, levels)).toBe('--diff-5');
    expect(differenceToken(-5.5, levels)).toBe('--diff-1');
    expect(differenceToken(4.5, levels)).toBe('--diff-11');
  });
});

describe('the gust histogram', () => {
  const enhanced = [270, 160, 70, 165, 220, 222, 268, 250, 182, 40, 0, 0, 0, 1];
  const plain = [270, 160, 72, 168, 228, 272, 306, 205, 165, 5, 0, 0, 0, 0];

  function Switch() {
    const { setUnit } = useUnits();
    return (
      <button type="button" onClick={() => setUnit('kt')}>
        knots
      </button>
    );
  }
  const show = () =>
    render(
      <MemoryRouter>
        <UnitsProvider personId="p">
          <Switch />
          <GustHistogram enhanced={enhanced} plain={plain} vortices fileName="test" />
        </UnitsProvider>
      </MemoryRouter>,
    );

  it('labels the same bins in the chosen unit, and leaves the counts alone', async () => {
    show();
    await userEvent.click(screen.getByRole('button', { name: 'Table' }));
    const rows = () => within(screen.getByRole('table')).getAllByRole('row').slice(1);
    expect(rows()).toHaveLength(14);
    expect(rows()[6]).toHaveTextContent('50.0–55.0268306');
    await userEvent.click(screen.getByRole('button', { name: 'knots' }));
    // 50 and 55 m/s are 97.2 and 106.9 kt (1 kt = 1852/3600 m/s).
    expect(rows()[6]).toHaveTextContent('97.2–106.9268306');
    expect(rows()[13]).toHaveTextContent('165.2+10');
  });

  it('opens the last bin upwards and draws plain as one flat step a bin', () => {
    expect(binLabels((speed) => speed.toFixed(0)).at(-1)).toBe('85+');
    expect(stepOutline([0, 50, 100], 100)).toBe('M0 100H1L1 50H2L2 0H3');
  });
});

describe('the ladder', () => {
  it('tells every step and ends in plain and vortices', () => {
    render(
      <MemoryRouter>
        <UnitsProvider personId="p">
          <GustLadder
            rungs={[
              {
                key: 'gradient',
                name: 'Gradient wind',
                reason: 'above',
                operation: 'start',
                amount: 50.3,
                afterMs: 50.3,
              },
              { key: 'surface', name: 'Down', reason: 'friction', operation: 'times', amount: 0.857, afterMs: 43.1 },
              { key: 'motion', name: 'Motion', reason: 'with it', operation: 'plus', amount: 3.4, afterMs: 46.5 },
            ]}
            plainMs={57.7}
            enhanced={null}
            vortices="no vortex range: layer off"
            aside="test"
            fileName="test"
          />
        </UnitsProvider>
      </MemoryRouter>,
    );
    expect(screen.getByRole('img')).toHaveAccessibleName(
      'From the gradient wind to the gust, m/s: Gradient wind gives 50.3; Down × 0.857 gives 43.1; Motion + 3.4 gives 46.5; plain gust 57.7; no vortex range: layer off.',
    );
  });
});

describe('land along the track', () => {
  it('runs from half-way before the first fix over land to half-way after the last', () => {
    const fixes = [false, false, true, true, false].map((overLand, index) => ({ timeMs: index * 10, overLand }));
    expect(landStretches(fixes)).toEqual([[15, 35]]);
  });
  it('keeps two crossings apart', () => {
    const fixes = [true, false, true].map((overLand, index) => ({ timeMs: index * 10, overLand }));
    expect(landStretches(fixes)).toEqual([
      [0, 5],
      [15, 20],
    ]);
  });
});

describe('a chart’s table', () => {
  it('leaves as a file that keeps to its columns and names the version of the cautions', async () => {
    const made: Blob[] = [];
    // The test page's own browser has neither.
    Object.assign(URL, {
      createObjectURL: (blob: Blob) => `blob:${made.push(blob)}`,
      revokeObjectURL: () => undefined,
    });
    const table = { columns: ['gust, m/s', 'sites'], rows: [['30 to 35, "open"', '12']] };
    render(
      <ChartFrame title="Sites" summary="Sites by gust" table={table} fileName="sites">
        {null}
      </ChartFrame>,
    );
    await userEvent.click(screen.getByRole('button', { name: 'Download' }));
    expect(made).toHaveLength(1);
    expect(await made[0]!.text()).toBe(`"gust, m/s",sites,notice_version\r\n"30 to 35, ""open""",12,${NOTICE_VERSION}`);
  });
});
