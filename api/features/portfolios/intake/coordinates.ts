import { readDecimal, type DecimalSign } from './numbers.ts';

export type Coordinate =
  | { kind: 'blank' }
  | { kind: 'unreadable' }
  | { kind: 'degrees'; degrees: number; decimals: number; sexagesimal: boolean };

/** Signs or spaces between the parts; letters would leave it open whether an s stands for seconds or for south. */
const PARTS =
  /^([NSEW])?\s*([-−+])?\s*(\d{1,3})\s*(?:[°º]|\s)\s*(\d{1,2}(?:[.,]\d+)?)\s*(?:['′’]\s*|\s+|$)(?:(\d{1,2}(?:[.,]\d+)?)\s*(?:["″”]|''|′′)?)?\s*([NSEW])?$/i;
const LETTERED = /^([NSEW])?\s*([-−+]?\d+(?:[.,]\d+)?)\s*°?\s*([NSEW])?$/i;

/** Reads decimal degrees, degrees with a hemisphere letter, or degrees, minutes and seconds; null letters and signs may not contradict. */
export function readCoordinate(
  text: string | undefined,
  axis: 'latitude' | 'longitude',
  decimal: DecimalSign,
): Coordinate {
  const trimmed = (text ?? '').trim();
  if (/^(?:|-|n\/?a|null|none)$/i.test(trimmed)) return { kind: 'blank' };
  const plain = readDecimal(trimmed, decimal);
  if (plain !== null) {
    const fraction = /[.,](\d+)$/.exec(trimmed)?.[1] ?? '';
    return { kind: 'degrees', degrees: plain, decimals: fraction.length, sexagesimal: false };
  }
  const lettered = LETTERED.exec(trimmed);
  if (lettered) {
    const value = readDecimal(lettered[2], decimal);
    const letter = oneLetter(lettered[1], lettered[3]);
    if (value === null || letter === undefined) return { kind: 'unreadable' };
    const signed = withHemisphere(value, value < 0 || /^[-−]/.test(lettered[2]!), letter, axis);
    const decimals = /[.,](\d+)$/.exec(lettered[2]!)?.[1]?.length ?? 0;
    return signed === null
      ? { kind: 'unreadable' }
      : { kind: 'degrees', degrees: signed, decimals, sexagesimal: false };
  }
  const parts = PARTS.exec(trimmed);
  if (!parts) return { kind: 'unreadable' };
  const minutes = Number(parts[4]!.replace(',', '.'));
  const seconds = Number((parts[5] ?? '0').replace(',', '.'));
  const letter = oneLetter(parts[1], parts[6]);
  if (minutes >= 60 || seconds >= 60 || letter === undefined) return { kind: 'unreadable' };
  const size = Number(parts[3]) + minutes / 60 + seconds / 3600;
  const signed = withHemisphere(size, parts[2] === '-' || parts[2] === '−', letter, axis);
  // A whole minute is about 2 km, a whole second about 30 m.
  const decimals = parts[5] !== undefined ? 4 : /[.,]/.test(parts[4]!) ? 4 : 2;
  return signed === null ? { kind: 'unreadable' } : { kind: 'degrees', degrees: signed, decimals, sexagesimal: true };
}

function oneLetter(before: string | undefined, after: string | undefined): string | null | undefined {
  if (before && after) return undefined;
  return (before ?? after)?.toUpperCase() ?? null;
}

function withHemisphere(
  size: number,
  minus: boolean,
  letter: string | null,
  axis: 'latitude' | 'longitude',
): number | null {
  if (letter === null) return minus ? -Math.abs(size) : size;
  if (minus || !(axis === 'latitude' ? 'NS' : 'EW').includes(letter)) return null;
  return letter === 'S' || letter === 'W' ? -size : size;
}

/** Degrees to five decimals, about a metre, with a true minus sign. */
export const degreesText = (degrees: number): string =>
  String(Math.round(Math.abs(degrees) * 1e5) / 1e5).replace(/^/, degrees < 0 ? '−' : '');
