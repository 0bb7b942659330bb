import { clock, shortDay } from '../../lib/dates.ts';

export interface TimeTick {
  timeMs: number;
  label: string;
  /** Midnight carries the date. */
  isMidnight: boolean;
}

const HOUR_MS = 3_600_000;
const STEPS_H = [1, 2, 3, 6, 12, 24, 48, 96];

/** Round hours between two instants, few enough to read. */
export const timeTicks = (fromMs: number, toMs: number, wanted = 6): TimeTick[] => {
  const hours = (toMs - fromMs) / HOUR_MS;
  const stepMs = (STEPS_H.find((step) => hours / step <= wanted) ?? 168) * HOUR_MS;
  const ticks: TimeTick[] = [];
  for (let timeMs = Math.ceil(fromMs / stepMs) * stepMs; timeMs <= toMs; timeMs += stepMs) {
    const instant = new Date(timeMs);
    const isMidnight = instant.getUTCHours() === 0;
    ticks.push({ timeMs, label: isMidnight ? shortDay(instant) : clock(instant), isMidnight });
  }
  return ticks;
};
