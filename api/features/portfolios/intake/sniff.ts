/** Encodings a location file may come in; TextDecoder labels. */
export type Encoding = 'utf-8' | 'utf-16le' | 'utf-16be' | 'windows-1252';
export type Delimiter = ',' | ';' | '\t' | '|';
const DELIMITERS: readonly Delimiter[] = [',', ';', '\t', '|'];
const HEADER_LINES = 20;

const starts = (bytes: Uint8Array, ...signature: number[]) => signature.every((byte, i) => bytes[i] === byte);
const ascii = (bytes: Uint8Array) =>
  Buffer.from(bytes.buffer, bytes.byteOffset, Math.min(bytes.length, 4096)).toString('latin1');

/** What a file is when it isn't text, in words; null when it may be text. */
export function notText(head: Uint8Array): string | null {
  if (starts(head, 0x50, 0x4b, 0x03, 0x04) || starts(head, 0x50, 0x4b, 0x05, 0x06)) {
    return /\[Content_Types\]|xl\/|docProps/.test(ascii(head)) ? 'an Excel workbook (XLSX)' : 'a ZIP archive';
  }
  if (starts(head, 0xd0, 0xcf, 0x11, 0xe0)) return 'an older Excel workbook (XLS)';
  if (starts(head, 0x89, 0x50, 0x4e, 0x47)) return 'a PNG picture';
  if (starts(head, 0xff, 0xd8, 0xff)) return 'a JPEG picture';
  if (starts(head, 0x47, 0x49, 0x46, 0x38)) return 'a GIF picture';
  if (starts(head, 0x25, 0x50, 0x44, 0x46)) return 'a PDF document';
  if (starts(head, 0x1f, 0x8b)) return 'a compressed archive';
  if (starts(head, 0x37, 0x7a, 0xbc, 0xaf) || starts(head, 0x52, 0x61, 0x72, 0x21)) return 'a compressed archive';
  return null;
}

/** The encoding a byte order mark declares; null without one. */
export function markedEncoding(head: Uint8Array): Encoding | null {
  if (starts(head, 0xef, 0xbb, 0xbf)) return 'utf-8';
  if (starts(head, 0xff, 0xfe)) return 'utf-16le';
  return starts(head, 0xfe, 0xff) ? 'utf-16be' : null;
}

/** Cells of each of the first lines under one delimiter, quotes respected. */
function cellCounts(text: string, delimiter: string, lines: number): number[] {
  const counts: number[] = [];
  let cells = 1;
  let quoted = false;
  let fieldStart = true;
  for (let i = 0; i < text.length && counts.length < lines; i++) {
    const char = text[i]!;
    if (quoted) {
      if (char === '"') {
        if (text[i + 1] === '"') i++;
        else quoted = false;
      }
      continue;
    }
    if (char === '"' && fieldStart) quoted = true;
    else if (char === delimiter) cells++;
    else if (char === '\n' || char === '\r') {
      if (char === '\r' && text[i + 1] === '\n') i++;
      counts.push(cells);
      cells = 1;
    }
    fieldStart = char === delimiter || char === '\n' || char === '\r';
  }
  return counts;
}

/** The delimiter that cuts most of the first lines into the same number of cells, more cells preferred. */
export function sniffDelimiter(text: string): { delimiter: Delimiter; columns: number } {
  let best: { delimiter: Delimiter; columns: number } = { delimiter: ',', columns: 1 };
  let bestScore = 0;
  // A last line without its end would be counted short.
  const whole = text.endsWith('\n') || text.endsWith('\r') ? text : `${text}\n`;
  for (const delimiter of DELIMITERS) {
    const times = new Map<number, number>();
    for (const count of cellCounts(whole, delimiter, 100)) if (count > 1) times.set(count, (times.get(count) ?? 0) + 1);
    for (const [cells, lines] of times) {
      const score = lines * (1 + Math.log2(cells));
      if (score > bestScore) [best, bestScore] = [{ delimiter, columns: cells }, score];
    }
  }
  return best;
}

const numeric = (cell: string) => /^[-−+$€£(]?\s*\d[\d.,\s]*%?\)?$/.test(cell.trim());

/**
 * Position of the line with the column names among the first twenty: the line with most headers we know, else the
 * first line of several different words that a line with numbers follows. Null when there is none.
 */
export function findHeader(
  lines: readonly (readonly string[])[],
  known: (cells: readonly string[]) => number,
): number | null {
  const first = lines.slice(0, HEADER_LINES);
  let best = -1;
  let most = 1;
  first.forEach((cells, index) => {
    const score = known(cells);
    if (score > most) [best, most] = [index, score];
  });
  if (best >= 0) return best;
  const found = first.findIndex((cells, index) => {
    const words = cells.filter((cell) => cell.trim());
    const distinct = new Set(words.map((word) => word.trim().toLowerCase())).size === words.length;
    const next = lines[index + 1];
    return words.length >= 2 && distinct && !words.some(numeric) && next !== undefined && next.some(numeric);
  });
  return found < 0 ? null : found;
}
