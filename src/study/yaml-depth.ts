import { type CST, Parser } from 'yaml';

/**
 * Looks for nesting beyond a depth without recursion, so that no text can exhaust the stack, as composing it would.
 *
 * @param onNewLine told the offset of every line of the text
 * @returns offset of the first value deeper than so many levels, undefined if there is none
 */
export function firstDeeperThan(levels: number, text: string, onNewLine: (offset: number) => void): number | undefined {
  for (const token of new Parser(onNewLine).parse(text)) {
    const open: { readonly token: CST.Token; readonly depth: number }[] = [{ token, depth: 0 }];
    for (let next = open.pop(); next !== undefined; next = open.pop()) {
      if (next.depth > levels) return next.token.offset;
      for (const child of childrenOf(next.token)) open.push({ token: child, depth: next.depth + 1 });
    }
  }
  return undefined;
}

function childrenOf(token: CST.Token): readonly CST.Token[] {
  if ('items' in token) return token.items.flatMap(({ key, value }) => [key ?? [], value ?? []].flat());
  return 'value' in token && typeof token.value === 'object' ? [token.value] : [];
}
