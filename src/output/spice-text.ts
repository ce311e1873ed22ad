/** Columns beyond which a line of a deck is continued on the next. */
const MOST_COLUMNS = 120;

/**
 * A number in a deck: the shortest decimal that reads back equal. No unit letters, which every simulator reads its own way.
 *
 * @throws RangeError if the value is not finite
 */
export function spiceNumber(value: number): string {
  if (!Number.isFinite(value)) throw new RangeError(`only finite numbers can stand in a deck, got ${value}`);
  return String(value);
}

/** A statement on as many lines as it needs; further ones begin with `+`. Words are never broken. */
export function spiceStatement(text: string): string {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(' ')) {
    if (line !== '' && line.length + 1 + word.length > MOST_COLUMNS) {
      lines.push(line);
      line = `+ ${word}`;
    } else line = line === '' ? word : `${line} ${word}`;
  }
  return [...lines, line].join('\n');
}

/** An expression for the greatest or the least of several. */
export function extremeOf(kind: 'max' | 'min', terms: readonly string[]): string {
  if (terms.length === 1) return terms[0];
  const half = Math.ceil(terms.length / 2);
  return `${kind}(${extremeOf(kind, terms.slice(0, half))}, ${extremeOf(kind, terms.slice(half))})`;
}

/** Name of module `m` in a deck, by string and position from 1. */
export function moduleName({ positions }: { readonly positions: number }, m: number): string {
  return `s${Math.floor(m / positions) + 1}p${(m % positions) + 1}`;
}

/** Name of a node of the wiring: ground is bus minus. */
export function nodeName(node: number): string {
  return node === 0 ? '0' : node === 1 ? 'bank' : `n${node}`;
}
