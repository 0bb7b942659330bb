/** Numbers as the screens write them: comma thousands, a true minus, an en dash without spaces in ranges. */
const EN_DASH = '–';
const NO_BREAK_SPACE = '\u00a0';

const formats = new Map<number, Intl.NumberFormat>();
const formatFor = (decimals: number) => {
  let format = formats.get(decimals);
  if (!format) {
    format = new Intl.NumberFormat('en-GB', { minimumFractionDigits: decimals, maximumFractionDigits: decimals });
    formats.set(decimals, format);
  }
  return format;
};

const withTrueMinus = (text: string) => (/[1-9]/.test(text) ? text.replace('-', '−') : text.replace('-', ''));

export const decimal = (value: number, decimals: number): string => withTrueMinus(formatFor(decimals).format(value));
export const count = (value: number): string => decimal(value, 0);
/** "1 site", "1,604 sites". */
export const counted = (value: number, one: string, many = `${one}s`): string =>
  `${count(value)} ${value === 1 ? one : many}`;
/** A share of 0–1 in percent, one decimal unless said otherwise. */
export const percent = (share: number, decimals = 1): string => `${decimal(share * 100, decimals)}${NO_BREAK_SPACE}%`;
/** "63.6–67.8"; with a minus in it "−3 to 4", since a dash beside a minus can't be read. */
export const range = (low: string, high: string): string => {
  if (low === high) return low;
  return /^−/.test(low) || /^−/.test(high) ? `${low} to ${high}` : `${low}${EN_DASH}${high}`;
};

/** A change with its sign always written: "+ 13.4", "− 2.7"; "0" where it rounds to nothing. */
export const signed = (value: number, decimals: number): string => {
  const size = decimal(Math.abs(value), decimals);
  return /[1-9]/.test(size) ? `${value < 0 ? '−' : '+'} ${size}` : '0';
};

/** Decimals that leave three significant figures, at most two of them after the point. */
export const decimalsFor = (value: number): number => {
  const size = Math.abs(value);
  // 99.95 would print as 100.0 with one decimal.
  if (size >= 99.95 || size === 0) return 0;
  return size >= 9.995 ? 1 : 2;
};
const NUMBER_WORDS = ['No', 'One', 'Two', 'Three', 'Four', 'Five', 'Six', 'Seven', 'Eight', 'Nine', 'Ten'];
/** Small counts as words at the start of a sentence. */
export const countInWords = (value: number): string => NUMBER_WORDS[value] ?? count(value);

/** File sizes in decimal units, as file managers show them. */
export const bytes = (size: number): string => {
  if (size < 1000) return counted(size, 'byte');
  if (size < 1_000_000) return `${decimal(size / 1000, 0)} kB`;
  return `${decimal(size / 1_000_000, 1)} MB`;
};
