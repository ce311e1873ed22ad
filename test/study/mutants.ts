const SCRAPS = [
  '{',
  '}',
  '[',
  ']',
  ':',
  ': ',
  '- ',
  '#',
  '&a ',
  '*a',
  '!!map ',
  '|',
  '>',
  '"',
  "'",
  '\n',
  '\n\n  ',
  '\t',
  '\0',
  '\u001b[31m',
  'null',
  'true',
  '.nan',
  '-.inf',
  '1e400',
  '-1',
  '0',
  '1e-320',
  '0x7fffffff',
  '999999999999999999999',
  '__proto__: 1\n',
  'constructor: 1\n',
  '<<: *a\n',
  '---\n',
  '%YAML 1.1\n',
  '? x\n',
  'like: newer\n',
  'modules: {A: {}}\n',
  '\ufeff',
  ',',
  ';',
  '\r',
  '\u00a0',
  '\u2212',
  '1,5',
  '"',
  '{x: 1}: 2\n',
  '!!float .inf',
  '0o17',
  '1e308',
  '-1e308',
  '4.9e-324',
  '\ud800',
  'file: measured.csv\n',
  'rows: resampled\n',
];

export type Random = () => number;

/** @returns the text with one to four changes: pieces lost, doubled, moved, or replaced by what readers stumble over */
export function mutated(text: string, random: Random): string {
  let result = text;
  const changes = 1 + Math.floor(random() * 4);
  for (let change = 0; change < changes; change++) result = onceMutated(result, random);
  return result;
}

function onceMutated(text: string, random: Random): string {
  const at = Math.floor(random() * (text.length + 1));
  const length = Math.floor(random() * 30);
  const scrap = SCRAPS[Math.floor(random() * SCRAPS.length)] ?? '';
  switch (Math.floor(random() * 7)) {
    case 0:
      return text.slice(0, at) + text.slice(at + length);
    case 1:
      return text.slice(0, at) + scrap + text.slice(at);
    case 2:
      return text.slice(0, at);
    case 3: {
      const lines = text.split('\n');
      const from = Math.floor(random() * lines.length);
      lines.splice(Math.floor(random() * lines.length), 0, lines[from] ?? '');
      return lines.join('\n');
    }
    case 4: {
      const lines = text.split('\n');
      lines.splice(Math.floor(random() * lines.length), 1);
      return lines.join('\n');
    }
    case 5: {
      const numbers = [...text.matchAll(/\d+(\.\d+)?/g)];
      const number = numbers[Math.floor(random() * numbers.length)];
      if (number === undefined) return text;
      return text.slice(0, number.index) + scrap + text.slice(number.index + number[0].length);
    }
    default: {
      const words = [...text.matchAll(/[A-Za-z_]+/g)];
      const one = words[Math.floor(random() * words.length)];
      const other = words[Math.floor(random() * words.length)];
      if (one === undefined || other === undefined) return text;
      return text.slice(0, one.index) + other[0] + text.slice(one.index + one[0].length);
    }
  }
}
