/** Which sign parts the decimals of the file's numbers. */
export type DecimalSign = 'point' | 'comma';

export type Amount =
  { kind: 'blank' } | { kind: 'amount'; minor: number } | { kind: 'negative'; minor: number } | { kind: 'unreadable' };

/** A single amount above this is a slip; the sum of a full file stays an exact integer well below 2^53. */
const LARGEST_MINOR = 10n ** 15n;
/** The usual cases, short enough to be exact, are read without detours: 1200000 and, with a decimal point, 1,200,000.50. */
const PLAIN = /^\d{1,12}$/;
const GROUPED = /^(\d{1,3}(?:,\d{3}){0,3})(?:\.(\d{2}))?$/;
const HAS_CURRENCY = /[A-Za-z$€£₱₹]/;
const BLANK = /^(?:-|–|—|n\/?a|nil|none|null)?$/i;
const CURRENCY = /^(?:[A-Z]{2,3}\s?)?[$€£₱₹]|^[A-Z]{3}(?=[\s\d(])|(?<=[\d)\s])(?:[A-Z]{3}|[$€£₱₹])$/g;
const PATTERN = {
  point: /^(?:\d+|\d{1,3}(?:[,\s’'_]\d{3})+)?(?:\.(\d*))?$/,
  comma: /^(?:\d+|\d{1,3}(?:[.\s’'_]\d{3})+)?(?:,(\d*))?$/,
};

/**
 * Reads money exactly: digits move to minor units as text, so no binary fraction ever stands between.
 * More than two decimals round half up. Words and suffixes ("1.2m", "12k", "1e6") are refused rather than guessed.
 */
export function readAmount(text: string | undefined, decimal: DecimalSign = 'point'): Amount {
  if (text === undefined) return { kind: 'blank' };
  const trimmed = text.trim();
  if (PLAIN.test(trimmed)) return { kind: 'amount', minor: Number(trimmed) * 100 };
  const grouped = decimal === 'point' ? GROUPED.exec(trimmed) : null;
  if (grouped) {
    return { kind: 'amount', minor: Number(grouped[1]!.replaceAll(',', '')) * 100 + Number(grouped[2] ?? 0) };
  }
  if (BLANK.test(trimmed)) return { kind: 'blank' };
  const marked = HAS_CURRENCY.test(trimmed);
  let digits = marked ? trimmed.replace(CURRENCY, '').trim() : trimmed;
  let negative = false;
  if (digits.startsWith('(') && digits.endsWith(')')) {
    negative = true;
    digits = digits.slice(1, -1).trim();
  } else if (/^[-−–]/.test(digits)) {
    negative = true;
    digits = digits.slice(1).trim();
  } else if (digits.startsWith('+')) digits = digits.slice(1).trim();
  if (marked) digits = digits.replace(CURRENCY, '').trim();
  const match = PATTERN[decimal].exec(digits);
  if (!match || !/\d/.test(digits)) return { kind: 'unreadable' };
  const fraction = match[1] ?? '';
  const whole = digits.slice(0, digits.length - (match[1] === undefined ? 0 : fraction.length + 1)).replace(/\D/g, '');
  const cents = BigInt(whole || '0') * 100n + BigInt(fraction.slice(0, 2).padEnd(2, '0'));
  const minor = fraction.length > 2 && fraction[2]! >= '5' ? cents + 1n : cents;
  if (minor > LARGEST_MINOR) return { kind: 'unreadable' };
  return negative && minor > 0n
    ? { kind: 'negative', minor: -Number(minor) }
    : { kind: 'amount', minor: Number(minor) };
}

/** A plain decimal number that isn't money, such as 2.5 or a percentage without its sign; null when it isn't one. */
export function readDecimal(text: string | undefined, decimal: DecimalSign = 'point'): number | null {
  const trimmed = (text ?? '').trim().replace(/^−/, '-');
  const pointed = decimal === 'comma' ? trimmed.replace(',', '.') : trimmed;
  return /^[+-]?(?:\d+\.?\d*|\.\d+)$/.test(pointed) ? Number(pointed) : null;
}

/** Part of an amount, half up in whole minor units; the percentage counts to a millionth of a percent. */
export const shareOf = (minor: number, percent: number): number =>
  Number((BigInt(minor) * BigInt(Math.round(percent * 1e6)) + 50_000_000n) / 100_000_000n);

const inThousands = (digits: string) => digits.replace(/\B(?=(\d{3})+$)/g, ',');

/** Minor units as people write them: 1,204,500,000 or 12.50; a true minus sign. */
export function moneyText(minor: number): string {
  const absolute = Math.abs(minor);
  const cents = absolute % 100;
  const text = inThousands(String((absolute - cents) / 100)) + (cents ? `.${String(cents).padStart(2, '0')}` : '');
  return minor < 0 ? `−${text}` : text;
}

export const countText = (count: number): string => inThousands(String(count));

/** What stood in the cell, with a true minus sign and no more than a line of it. */
export const receivedText = (text: string): string => {
  const short = text.length > 60 ? `${text.slice(0, 59)}…` : text;
  return /^-\d/.test(short) ? `−${short.slice(1)}` : short;
};

export const rowsText = (count: number): string => (count === 1 ? '1 row' : `${countText(count)} rows`);
