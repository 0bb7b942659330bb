/** Dates as "4 Sep 2026 18:00 UTC": always UTC, always with the word. */
const part = (options: Intl.DateTimeFormatOptions) => {
  const format = new Intl.DateTimeFormat('en-GB', { timeZone: 'UTC', ...options });
  return (instant: string | Date) => format.format(new Date(instant));
};

const dayOfMonth = part({ day: 'numeric' });
const monthName = part({ month: 'short' });
const fullYear = part({ year: 'numeric' });
const weekday = part({ weekday: 'long' });
const longMonth = part({ month: 'long' });
const hourAndMinute = part({ hour: '2-digit', minute: '2-digit', hour12: false });

// Some runtimes write "Sept"; the pages write three letters.
const shortMonth = (instant: string | Date) => monthName(instant).slice(0, 3);

/** "4 Sep 2026" */
export const day = (instant: string | Date): string =>
  `${dayOfMonth(instant)} ${shortMonth(instant)} ${fullYear(instant)}`;
/** "4 Sep" */
export const shortDay = (instant: string | Date): string => `${dayOfMonth(instant)} ${shortMonth(instant)}`;
/** "18:00" */
export const clock = (instant: string | Date): string => hourAndMinute(instant);
/** "4 Sep 2026 18:00 UTC" */
export const utc = (instant: string | Date): string => `${day(instant)} ${clock(instant)} UTC`;
/** "Friday 4 September 2026" */
export const longDay = (instant: string | Date): string =>
  `${weekday(instant)} ${dayOfMonth(instant)} ${longMonth(instant)} ${fullYear(instant)}`;
/** The time of today, or the day of another: "18:00" or "4 Sep". */
export const clockOrDay = (instant: string, now: Date = new Date()): string =>
  day(instant) === day(now) ? clock(instant) : shortDay(instant);
/** Elapsed time in words: "40 s", "5 min", "3 h", "2 days". */
export const elapsed = (fromMs: number, toMs: number): string => {
  const seconds = Math.max(0, Math.round((toMs - fromMs) / 1000));
  if (seconds < 90) return `${seconds} s`;
  if (seconds < 5400) return `${Math.round(seconds / 60)} min`;
  if (seconds < 129_600) return `${Math.round(seconds / 3600)} h`;
  return `${Math.round(seconds / 86_400)} days`;
};
