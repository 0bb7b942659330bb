import type { SiteDetail } from '#contract/runs.ts';
import { decimal } from '../../lib/numbers.ts';
import type { LadderRung } from '../../ui/charts/gust-ladder.tsx';

const STEP_NAMES: Record<SiteDetail['ladder'][number]['key'], string> = {
  gradient: 'Gradient wind',
  surface: 'Down to the surface',
  motion: 'Storm’s own motion',
  terrain: 'Terrain upwind',
  gust_factor: 'Gust factor',
  hills: 'Hills',
};

export const ladderRungs = (site: SiteDetail): LadderRung[] =>
  site.ladder.map((step) => ({ ...step, name: STEP_NAMES[step.key] }));

/** "reinforced masonry, hotel, 4 storeys, 1998", what is known of it. */
export const buildingText = ({ construction, occupancy, storeys, yearBuilt }: SiteDetail): string =>
  [
    construction,
    occupancy,
    storeys === null ? '' : `${decimal(storeys, 0)} ${storeys === 1 ? 'storey' : 'storeys'}`,
    yearBuilt === null ? '' : String(yearBuilt),
  ]
    .filter(Boolean)
    .join(', ');

const SECTORS = ['N', 'NE', 'E', 'SE', 'S', 'SW', 'W', 'NW'];

/** Land upwind by where the wind comes from; sites at sea or right at the shore have none. */
export const fetchRows = (fetchM: readonly number[]): { sector: string; km: number }[] =>
  fetchM.map((metres, index) => ({ sector: SECTORS[index] ?? String(index), km: metres / 1000 }));
