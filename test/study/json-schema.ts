/** The words of JSON Schema (draft 2020-12) that the published schema uses. */
export interface JsonSchema {
  readonly type?: string | readonly string[];
  readonly properties?: Readonly<Record<string, JsonSchema>>;
  readonly additionalProperties?: boolean | JsonSchema;
  readonly propertyNames?: JsonSchema;
  readonly required?: readonly string[];
  readonly anyOf?: readonly JsonSchema[];
  readonly oneOf?: readonly JsonSchema[];
  readonly enum?: readonly unknown[];
  readonly const?: unknown;
  readonly items?: JsonSchema;
  readonly prefixItems?: readonly JsonSchema[];
  readonly minItems?: number;
  readonly maxItems?: number;
  readonly minLength?: number;
  readonly maxLength?: number;
  readonly minimum?: number;
  readonly maximum?: number;
  readonly exclusiveMinimum?: number;
  readonly exclusiveMaximum?: number;
  readonly pattern?: string;
}

const ANNOTATIONS = ['$schema', 'title', 'description', 'default'];
const KNOWN = new Set([
  ...ANNOTATIONS,
  ...['type', 'properties', 'additionalProperties', 'propertyNames', 'required', 'anyOf', 'oneOf', 'enum', 'const'],
  ...['items', 'prefixItems', 'minItems', 'maxItems', 'minLength', 'maxLength', 'minimum', 'maximum'],
  ...['exclusiveMinimum', 'exclusiveMaximum', 'pattern'],
]);

/**
 * Independent reading of a JSON Schema, written from the specification for tests only.
 *
 * @returns path of a value that the schema refuses, null if it accepts all
 * @throws Error on a word of the schema that it does not know: nothing is accepted for want of understanding
 */
export function refusedAt(schema: JsonSchema, value: unknown, path = '$'): string | null {
  for (const word of Object.keys(schema)) if (!KNOWN.has(word)) throw new Error(`unknown schema word ${word}`);
  if (schema.type !== undefined && ![schema.type].flat().some((type) => isOfType(value, type))) return path;
  if (schema.const !== undefined && value !== schema.const) return path;
  if (schema.enum && !schema.enum.includes(value)) return path;
  if (schema.anyOf && !schema.anyOf.some((one) => refusedAt(one, value, path) === null)) return path;
  if (schema.oneOf && schema.oneOf.filter((one) => refusedAt(one, value, path) === null).length !== 1) return path;
  if (typeof value === 'number' && !isWithin(schema, value)) return path;
  if (typeof value === 'string') {
    if (value.length < (schema.minLength ?? 0) || value.length > (schema.maxLength ?? Number.POSITIVE_INFINITY))
      return path;
    if (schema.pattern !== undefined && !new RegExp(schema.pattern, 'u').test(value)) return path;
  }
  if (Array.isArray(value)) return listRefusedAt(schema, value, path);
  if (typeof value === 'object' && value !== null) return mappingRefusedAt(schema, value, path);
  return null;
}

function isOfType(value: unknown, type: string): boolean {
  if (type === 'null') return value === null;
  if (type === 'array') return Array.isArray(value);
  if (type === 'object') return typeof value === 'object' && value !== null && !Array.isArray(value);
  if (type === 'integer') return Number.isInteger(value);
  return typeof value === type;
}

function isWithin(schema: JsonSchema, value: number): boolean {
  const { minimum, maximum, exclusiveMinimum, exclusiveMaximum } = schema;
  return (
    value >= (minimum ?? Number.NEGATIVE_INFINITY) &&
    value <= (maximum ?? Number.POSITIVE_INFINITY) &&
    value > (exclusiveMinimum ?? Number.NEGATIVE_INFINITY) &&
    value < (exclusiveMaximum ?? Number.POSITIVE_INFINITY)
  );
}

function listRefusedAt(schema: JsonSchema, list: readonly unknown[], path: string): string | null {
  if (list.length < (schema.minItems ?? 0) || list.length > (schema.maxItems ?? Number.POSITIVE_INFINITY)) return path;
  for (const [index, item] of list.entries()) {
    const own = schema.prefixItems?.[index] ?? schema.items;
    const refused = own && refusedAt(own, item, `${path}[${index}]`);
    if (refused) return refused;
  }
  return null;
}

function mappingRefusedAt(schema: JsonSchema, mapping: object, path: string): string | null {
  for (const key of schema.required ?? []) if (!Object.hasOwn(mapping, key)) return `${path}.${key}`;
  for (const [key, item] of Object.entries(mapping)) {
    if (schema.propertyNames && refusedAt(schema.propertyNames, key) !== null) return `${path}.${key}`;
    const own = schema.properties?.[key] ?? schema.additionalProperties;
    if (own === false) return `${path}.${key}`;
    const refused = typeof own === 'object' && refusedAt(own, item, `${path}.${key}`);
    if (refused) return refused;
  }
  return null;
}
