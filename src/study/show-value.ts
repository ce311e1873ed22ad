const LONGEST = 48;

/** @returns the value found in a study, short enough for the end of a one-line message */
export function showValue(value: unknown): string {
  if (value === undefined) return 'nothing';
  if (typeof value === 'string') return shorten(JSON.stringify(value));
  if (Array.isArray(value)) return showList(value);
  if (typeof value === 'object' && value !== null) return shorten(`{${Object.keys(value).join(', ')}}`);
  return shorten(String(value));
}

function showList(list: readonly unknown[]): string {
  const plain = list.every((item) => typeof item !== 'object' || item === null);
  const text = plain ? `[${list.slice(0, 12).map(showValue).join(', ')}]` : '';
  return plain && list.length <= 12 && text.length <= LONGEST ? text : `a list of ${list.length}`;
}

function shorten(text: string): string {
  return text.length <= LONGEST ? text : `${text.slice(0, LONGEST - 4)} ...`;
}
