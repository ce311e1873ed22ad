/** A JSON Schema of study files, as far as the tables of keys look into it. */
export interface KeySchema {
  readonly type?: string;
  readonly const?: unknown;
  readonly enum?: readonly unknown[];
  readonly minimum?: number;
  readonly exclusiveMinimum?: number;
  readonly maximum?: number;
  readonly description?: string;
  readonly default?: unknown;
  readonly required?: readonly string[];
  readonly properties?: Readonly<Record<string, KeySchema>>;
  readonly additionalProperties?: KeySchema | boolean;
  readonly items?: KeySchema;
  readonly anyOf?: readonly KeySchema[];
  readonly oneOf?: readonly KeySchema[];
}

/** Keys from which a mapping is not shown a second time. */
const LONG = 4;

/** A key of a study file with what may stand there. */
interface KeyRow {
  readonly path: string;
  readonly takes: string;
  readonly standard: string;
  readonly meaning: string;
}

/**
 * The keys of a study file as Markdown, one table per section, and one of the laws of a spread.
 *
 * @param schema published JSON Schema of study files
 */
export function renderStudyKeys(schema: KeySchema): string {
  const sections = Object.entries(schema.properties ?? {});
  const plain = sections.filter(([, section]) => !isNested(section));
  const nested = sections.filter(([, section]) => isNested(section));
  const top = table(
    'Top of the file',
    plain.map(([key, section]) => rowOf(key, section, isRequired(schema, key))),
  );
  const shown = new Map<string, string>();
  const parts = nested.map(([key, section]) => table(`\`${key}\``, dropRepeats(rowsBelow(key, section, shown))));
  return `${[top, ...parts, table('Laws of a spread', lawRows(schema))].join('\n\n')}\n`;
}

function isNested(schema: KeySchema): boolean {
  return rowsBelow('', schema, new Map()).length > 0;
}

/**
 * Rows of everything below a path, in the order of the schema; a spread is one row, explained by the laws.
 *
 * @param shown where mappings have been shown already, by their schema; grows
 */
function rowsBelow(path: string, schema: KeySchema, shown: Map<string, string>): readonly KeyRow[] {
  if (isSpread(schema)) return [];
  if (isLong(schema)) {
    const first = shown.get(JSON.stringify(withoutTitle(schema)));
    if (first !== undefined) return [{ path, takes: 'mapping', standard: '', meaning: `Keys as in \`${first}\`.` }];
    shown.set(JSON.stringify(withoutTitle(schema)), path);
  }
  const at = (key: string): string => (path === '' ? key : `${path}.${key}`);
  return alternativesOf(schema).flatMap((alternative) => {
    const { properties = {}, additionalProperties, items } = alternative;
    return [
      ...Object.entries(properties).flatMap(([key, value]) => [
        ...(hasOwnKeys(value) ? [] : [rowOf(at(key), value, isRequired(alternative, key))]),
        ...rowsBelow(at(key), value, shown),
      ]),
      ...(typeof additionalProperties === 'object' ? rowsBelow(at('<name>'), additionalProperties, shown) : []),
      ...(items === undefined ? [] : rowsBelow(`${path}[]`, items, shown)),
    ];
  });
}

/** A mapping of many keys, worth a reference where it comes again. */
function isLong({ properties = {} }: KeySchema): boolean {
  return Object.keys(properties).length >= LONG;
}

function withoutTitle({ description, ...rest }: KeySchema): unknown {
  return rest;
}

/** A mapping is described by its keys; anything that may also be a single value has a row of its own. */
function hasOwnKeys(schema: KeySchema): boolean {
  return alternativesOf(schema).every(({ type }) => type === 'object') && !isSpread(schema);
}

function rowOf(path: string, schema: KeySchema, required: boolean): KeyRow {
  const standard = 'default' in schema ? `\`${JSON.stringify(schema.default)}\`` : required ? 'must be given' : '';
  return { path, takes: takes(schema), standard, meaning: schema.description ?? '' };
}

/** What a value may be, in words. */
function takes(schema: KeySchema): string {
  if (isSpread(schema)) {
    const [number, ...others] = alternativesOf(schema).filter(({ properties }) => properties === undefined);
    return [takes(number ?? {}), 'a spread', ...others.map(takes)].join(', or ');
  }
  const alternatives = alternativesOf(schema);
  if (alternatives.length > 1) return [...new Set(alternatives.map(takes))].join(', or ');
  if (schema.const !== undefined) return `\`${String(schema.const)}\``;
  if (schema.enum !== undefined) return schema.enum.map((value) => `\`${String(value)}\``).join(', ');
  switch (schema.type) {
    case 'number':
    case 'integer':
      return [schema.type === 'integer' ? 'whole number' : 'number', ...bounds(schema)].join(' ');
    case 'string':
      return 'text';
    case 'boolean':
      return '`true`, `false`';
    case 'null':
      return '`null`';
    case 'array':
      return `list of: ${takes(schema.items ?? {})}`;
    default:
      return 'mapping';
  }
}

function bounds({ minimum, exclusiveMinimum, maximum }: KeySchema): readonly string[] {
  // The largest whole number that JSON carries is no limit that anybody set.
  const most = maximum === undefined || maximum >= Number.MAX_SAFE_INTEGER ? [] : [`to ${maximum}`];
  if (exclusiveMinimum !== undefined) return [`above ${exclusiveMinimum}`, ...most];
  return minimum === undefined ? most : [`from ${minimum}`, ...most];
}

function alternativesOf(schema: KeySchema): readonly KeySchema[] {
  const alternatives = schema.anyOf ?? schema.oneOf;
  return alternatives === undefined ? [schema] : alternatives.flatMap(alternativesOf);
}

const LEVELS = ['bank', 'lot', 'module', 'cell'];

/** A number, or a mapping of a nominal value and laws at levels. */
function isSpread(schema: KeySchema): boolean {
  return alternativesOf(schema).some(
    ({ properties = {} }) => 'nominal' in properties && LEVELS.some((level) => level in properties),
  );
}

/** The laws that a level of the first spread in the schema may follow, one row each. */
function lawRows(schema: KeySchema): readonly KeyRow[] {
  const spread = findSpread(schema);
  const mapping = alternativesOf(spread ?? {}).find(({ properties = {} }) => 'nominal' in properties);
  const level = LEVELS.map((name) => mapping?.properties?.[name]).find((found) => found !== undefined);
  return alternativesOf(level ?? {}).map((law) => {
    const { law: name, ...others } = law.properties ?? {};
    const keys = Object.keys(others).map((key) => `\`${key}\``);
    return {
      path: `law: ${String(name?.const)}`,
      takes: keys.length === 0 ? 'nothing else' : keys.join(', '),
      standard: '',
      meaning: law.description ?? '',
    };
  });
}

function findSpread(schema: KeySchema): KeySchema | null {
  if (isSpread(schema)) return schema;
  for (const { properties = {}, additionalProperties, items } of alternativesOf(schema)) {
    const below = [...Object.values(properties), additionalProperties, items];
    for (const child of below) {
      const found = typeof child === 'object' ? findSpread(child) : null;
      if (found !== null) return found;
    }
  }
  return null;
}

function isRequired(schema: KeySchema, key: string): boolean {
  return schema.required?.includes(key) ?? false;
}

/** Alternatives of a mapping share keys: each is shown once. */
function dropRepeats(rows: readonly KeyRow[]): readonly KeyRow[] {
  const seen = new Set<string>();
  return rows.filter((row) => {
    const text = rowText(row);
    if (seen.has(text)) return false;
    seen.add(text);
    return true;
  });
}

function table(title: string, rows: readonly KeyRow[]): string {
  return [`### ${title}`, '', '| key | takes | default | meaning |', '|---|---|---|---|', ...rows.map(rowText)].join(
    '\n',
  );
}

function rowText({ path, takes: value, standard, meaning }: KeyRow): string {
  return `| \`${path}\` | ${value} | ${standard} | ${meaning.replaceAll('|', '\\|')} |`;
}
