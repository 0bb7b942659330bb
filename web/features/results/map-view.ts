import type { Draws } from '#contract/draws.ts';
import type { MapView } from '../../ui/map/map-data.ts';

/** What the full-size map shows; the address keeps it. */
export type MapChoice = 'plain' | 'enhanced' | 'difference' | 'draw' | 'chance';
export type EnhancedLevel = 'p50' | 'p90' | 'p99';

export const CHOICES: readonly { value: MapChoice; label: string }[] = [
  { value: 'plain', label: 'Plain' },
  { value: 'enhanced', label: 'Enhanced' },
  { value: 'difference', label: 'Difference' },
  { value: 'draw', label: 'One draw' },
  { value: 'chance', label: 'Chance above' },
];
export const LEVELS: readonly { value: EnhancedLevel; label: string }[] = [
  { value: 'p50', label: 'Median' },
  { value: 'p90', label: '90 %' },
  { value: 'p99', label: '99 %' },
];

const VIEWS: readonly MapView[] = ['plain', 'p50', 'p90', 'p99', 'difference', 'draw', 'chance'];
const isView = (text: string | null): text is MapView => VIEWS.some((view) => view === text);
const isLevel = (view: MapView): view is EnhancedLevel => LEVELS.some(({ value }) => value === view);

export const choiceOf = (view: MapView): MapChoice => (isLevel(view) ? 'enhanced' : view);
export const viewOf = (choice: MapChoice): MapView => (choice === 'enhanced' ? 'p50' : choice);

/** View, draw and gust an address asks for; what it doesn’t say or can’t mean is left to the usual one. */
export const readMapView = (
  search: URLSearchParams,
  { vortices, defaultGustMs }: { vortices: boolean; defaultGustMs: number },
): { view: MapView; draw: number | null; gustMs: number } => {
  const asked = search.get('view');
  const draw = Number(search.get('draw'));
  const gustMs = Number(search.get('gust'));
  return {
    view: !vortices ? 'plain' : isView(asked) ? asked : 'p50',
    draw: Number.isInteger(draw) && draw >= 1 && draw <= 264 ? draw : null,
    gustMs: search.has('gust') && gustMs >= 20 && gustMs <= 85 ? gustMs : defaultGustMs,
  };
};

/** Gusts offered for a chance: each step of the scale, and the run’s own. */
export const offeredGusts = (thresholdsMs: readonly number[], present: number): number[] =>
  [...new Set([...Array.from({ length: 14 }, (_, k) => 20 + 5 * k), ...thresholdsMs, present])].sort((a, b) => a - b);

type Ranked = Draws['draws'];

/** The draw so many ranks away, null beyond the first and the last. */
export const drawBeside = (draws: Ranked, draw: number, steps: number): number | null => {
  const at = draws.findIndex((one) => one.draw === draw);
  return at === -1 ? null : (draws[at + steps]?.draw ?? null);
};
