import { describe, expect, it } from 'vitest';
import { type KeySchema, renderStudyKeys } from '../../src/output/study-keys.js';
import { studyJsonSchema } from '../../src/study/study-file.js';
import { repositoryText } from '../study/study-under-test.js';

const law: KeySchema = {
  oneOf: [
    { type: 'object', properties: { law: { const: 'fixed' } } },
    { type: 'object', properties: { law: { const: 'normal' }, sd: { type: 'number' } } },
  ],
};

describe('renderStudyKeys', () => {
  it('shows each key with what it takes, its default and its meaning, a spread in one row, a mapping once', () => {
    const mapping: KeySchema = {
      type: 'object',
      required: ['a'],
      properties: {
        a: { type: 'number', exclusiveMinimum: 0, maximum: 5, description: 'One | two.' },
        b: { enum: ['x', 'y'], default: 'x' },
        c: { anyOf: [{ type: 'number', minimum: -1 }, { type: 'null' }] },
        d: { type: 'array', items: { type: 'string' } },
      },
    };
    const spread: KeySchema = {
      anyOf: [{ type: 'number' }, { type: 'object', properties: { nominal: { type: 'number' }, module: law } }],
    };
    const schema: KeySchema = {
      type: 'object',
      properties: {
        seed: { type: 'integer', minimum: 0, maximum: Number.MAX_SAFE_INTEGER, default: 1 },
        stock: { type: 'object', additionalProperties: { type: 'object', properties: { capacity_Ah: spread } } },
        bank: mapping,
        candidates: { type: 'object', properties: { own: mapping } },
      },
    };
    expect(renderStudyKeys(schema)).toBe(`### Top of the file

| key | takes | default | meaning |
|---|---|---|---|
| \`seed\` | whole number from 0 | \`1\` |  |

### \`stock\`

| key | takes | default | meaning |
|---|---|---|---|
| \`stock.<name>.capacity_Ah\` | number, or a spread |  |  |

### \`bank\`

| key | takes | default | meaning |
|---|---|---|---|
| \`bank.a\` | number above 0 to 5 | must be given | One \\| two. |
| \`bank.b\` | \`x\`, \`y\` | \`"x"\` |  |
| \`bank.c\` | number from -1, or \`null\` |  |  |
| \`bank.d\` | list of: text |  |  |

### \`candidates\`

| key | takes | default | meaning |
|---|---|---|---|
| \`candidates.own\` | mapping |  | Keys as in \`bank\`. |

### Laws of a spread

| key | takes | default | meaning |
|---|---|---|---|
| \`law: fixed\` | nothing else |  |  |
| \`law: normal\` | \`sd\` |  |  |
`);
  });

  it('is what studies/README.md holds: renew it with `node dist/src/cli.js schema --keys`', () => {
    const [, keys] = repositoryText('studies/README.md').split(/<!-- keys: (?:begin|end) -->\n/);
    expect(keys).toBe(renderStudyKeys(studyJsonSchema() as KeySchema));
  });

  it('leaves no key of a study and no law without its meaning', () => {
    const rows = renderStudyKeys(studyJsonSchema() as KeySchema)
      .split('\n')
      .filter((line) => line.startsWith('| `'));
    expect(rows.length).toBeGreaterThan(300);
    expect(rows.filter((row) => / \|\s+\|$/.test(row))).toEqual([]);
  });
});
