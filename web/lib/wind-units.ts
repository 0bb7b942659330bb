/** Units a gust can be shown in. Everything travels in m/s; only the text changes, never a colour or a class edge. */
export const WIND_UNITS = ['ms', 'mph', 'kmh', 'kt'] as const;
export type WindUnit = (typeof WIND_UNITS)[number];

export const WIND_UNIT_LABELS: Record<WindUnit, string> = { ms: 'm/s', mph: 'mph', kmh: 'km/h', kt: 'kt' };

/** Metres per second in one of the unit: the mile and the nautical mile are exact by definition. */
const METRES_PER_SECOND: Record<WindUnit, number> = {
  ms: 1,
  mph: 1609.344 / 3600,
  kmh: 1000 / 3600,
  kt: 1852 / 3600,
};

export const isWindUnit = (text: string | null): text is WindUnit => WIND_UNITS.some((unit) => unit === text);
export const fromMetresPerSecond = (speedMs: number, unit: WindUnit): number => speedMs / METRES_PER_SECOND[unit];
export const toMetresPerSecond = (speed: number, unit: WindUnit): number => speed * METRES_PER_SECOND[unit];
