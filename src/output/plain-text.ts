/** Columns of a terminal that nothing printed goes beyond. */
export const SCREEN_COLUMNS = 100;

/**
 * Text of a study as it may stand on a terminal: printable ASCII on one line. Accents are dropped, other characters become
 * `?`, and control characters, with which a title could move the cursor or change colours, go.
 */
export function asciiText(text: string): string {
  return text
    .normalize('NFKD')
    .replace(/\p{Mark}/gu, '')
    .replace(/\s+/gu, ' ')
    .replace(/\p{Other}/gu, '')
    .replace(/[^ -~]/gu, '?')
    .trim();
}

/**
 * Breaks a text at its blanks so that no line is longer than `width`; a longer word is cut.
 *
 * @param indents put before the first line and before every other one
 */
export function wrapText(
  text: string,
  width: number = SCREEN_COLUMNS,
  indents: { readonly first: string; readonly others: string } = { first: '', others: '' },
): readonly string[] {
  const { first, others } = indents;
  const room = width - Math.max(first.length, others.length);
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(' ').flatMap((whole) => piecesOf(whole, room))) {
    if (line === '') line = word;
    else if (line.length + 1 + word.length <= room) line = `${line} ${word}`;
    else {
      lines.push(line);
      line = word;
    }
  }
  return [...lines, line].map((one, index) => `${index === 0 ? first : others}${one}`);
}

function piecesOf(word: string, width: number): readonly string[] {
  const pieces: string[] = [];
  for (let start = 0; start < word.length; start += width) pieces.push(word.slice(start, start + width));
  return pieces;
}
