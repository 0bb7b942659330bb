const STEP_MS = 30 * 60_000;

/** Every half hour along a track, and its fixes. */
export const trackTimes = (fixTimes: readonly string[]): { stops: number[]; fixes: number[] } => {
  const fixes = [...new Set(fixTimes.map((time) => Date.parse(time)))].sort((a, b) => a - b);
  const first = fixes[0] ?? 0;
  const last = fixes.at(-1) ?? 0;
  const halfHours: number[] = [];
  for (let at = Math.ceil(first / STEP_MS) * STEP_MS; at <= last; at += STEP_MS) halfHours.push(at);
  return { stops: [...new Set([...fixes, ...halfHours])].sort((a, b) => a - b), fixes };
};

/** The stop nearest to a wished time; the given one when none is wished. */
export const stopNear = (stops: readonly number[], wished: string | null, otherwise: number): number => {
  const at = wished === null ? Number.NaN : Date.parse(wished);
  if (Number.isNaN(at)) return otherwise;
  return stops.reduce((best, stop) => (Math.abs(stop - at) < Math.abs(best - at) ? stop : best), otherwise);
};
