// What: JSON Schema (2020-12) as far as our own description uses it: is a schema one, and does a value fit it. Written for tests, so that
// the library that made the schemas is not the one that judges them. Must not: accept a keyword it does not know.
type Json = Record<string, unknown>;

const isObject = (value: unknown): value is Json =>
  typeof value === 'object' && value !== null && !Array.isArray(value);
const types = ['object', 'array', 'string', 'number', 'integer', 'boolean', 'null'];
/** Say something about a value without judging it; `format` is said again by `pattern` where it matters. */
const notes = [
  'description',
  'title',
  'default',
  'examples',
  'deprecated',
  'format',
  'contentEncoding',
  'contentMediaType',
];
const judges = [
  ...[
    '$ref',
    'type',
    'const',
    'enum',
    'anyOf',
    'oneOf',
    'allOf',
    'not',
    'properties',
    'required',
    'additionalProperties',
    'propertyNames',
  ],
  ...['items', 'prefixItems', 'minItems', 'maxItems', 'minLength', 'maxLength', 'pattern'],
  ...['minimum', 'maximum', 'exclusiveMinimum', 'exclusiveMaximum', 'multipleOf', 'minProperties', 'maxProperties'],
];

const listOf = (value: unknown): unknown[] => (Array.isArray(value) ? value : []);

/** What is wrong with a schema itself: places and words, empty when it is one. */
export function schemaProblems(schema: unknown, at = '#'): string[] {
  if (typeof schema === 'boolean') return [];
  if (!isObject(schema)) return [`${at} is no schema`];
  const found = Object.keys(schema).flatMap((word) =>
    [...notes, ...judges].includes(word) ? [] : [`${at} says ${word}`],
  );
  for (const type of listOf(schema.type ?? []).concat(typeof schema.type === 'string' ? schema.type : []))
    if (!types.includes(String(type))) found.push(`${at} is of type ${String(type)}`);
  if ('enum' in schema && listOf(schema.enum).length === 0) found.push(`${at} allows nothing`);
  if ('pattern' in schema) {
    try {
      new RegExp(String(schema.pattern), 'u');
    } catch {
      found.push(`${at} has a pattern that is none`);
    }
  }
  const inside = isObject(schema.properties) ? schema.properties : {};
  for (const name of listOf(schema.required))
    if (!(String(name) in inside)) found.push(`${at} requires ${String(name)}, which it does not describe`);
  for (const [name, member] of Object.entries(inside)) found.push(...schemaProblems(member, `${at}/${name}`));
  for (const word of ['anyOf', 'oneOf', 'allOf', 'prefixItems'])
    for (const [index, member] of listOf(schema[word]).entries())
      found.push(...schemaProblems(member, `${at}/${word}/${index}`));
  for (const word of ['items', 'additionalProperties', 'propertyNames', 'not'])
    if (word in schema) found.push(...schemaProblems(schema[word], `${at}/${word}`));
  return found;
}

function typeOf(value: unknown): string {
  if (value === null) return 'null';
  if (Array.isArray(value)) return 'array';
  return typeof value === 'number' ? 'number' : typeof value;
}

function fitsType(value: unknown, type: unknown): boolean {
  return type === 'integer' ? Number.isInteger(value) : typeOf(value) === type;
}

const same = (a: unknown, b: unknown) => JSON.stringify(a) === JSON.stringify(b);

/** Where a value does not fit a schema: places and words, empty when it fits. */
export function misfits(value: unknown, schema: unknown, at = '$'): string[] {
  if (schema === true) return [];
  if (!isObject(schema)) return [`${at}: nothing is allowed`];
  if ('$ref' in schema) return [`${at}: a reference is not followed here`];
  const found: string[] = [];
  const must = (word: string, holds: boolean) =>
    void (word in schema && !holds && found.push(`${at}: ${word} ${JSON.stringify(schema[word])}`));
  const fits = (one: unknown) => misfits(value, one, at).length === 0;

  must(
    'type',
    [schema.type].flat().some((type) => fitsType(value, type)),
  );
  must('const', same(value, schema.const));
  must(
    'enum',
    listOf(schema.enum).some((one) => same(value, one)),
  );
  must('anyOf', listOf(schema.anyOf).some(fits));
  must('oneOf', listOf(schema.oneOf).filter(fits).length === 1);
  must('allOf', listOf(schema.allOf).every(fits));
  must('not', !fits(schema.not));
  if (typeof value === 'string') {
    must('minLength', [...value].length >= Number(schema.minLength));
    must('maxLength', [...value].length <= Number(schema.maxLength));
    must('pattern', new RegExp(String(schema.pattern), 'u').test(value));
  }
  if (typeof value === 'number') {
    must('minimum', value >= Number(schema.minimum));
    must('maximum', value <= Number(schema.maximum));
    must('exclusiveMinimum', value > Number(schema.exclusiveMinimum));
    must('exclusiveMaximum', value < Number(schema.exclusiveMaximum));
    must('multipleOf', Number.isInteger(value / Number(schema.multipleOf)));
  }
  if (Array.isArray(value)) {
    must('minItems', value.length >= Number(schema.minItems));
    must('maxItems', value.length <= Number(schema.maxItems));
    const first = listOf(schema.prefixItems);
    for (const [index, member] of value.entries()) {
      const own = index < first.length ? first[index] : 'items' in schema ? schema.items : true;
      found.push(...misfits(member, own, `${at}[${index}]`));
    }
  }
  if (isObject(value)) {
    const known = isObject(schema.properties) ? schema.properties : {};
    must('minProperties', Object.keys(value).length >= Number(schema.minProperties));
    must('maxProperties', Object.keys(value).length <= Number(schema.maxProperties));
    for (const name of listOf(schema.required))
      if (!(String(name) in value)) found.push(`${at}: ${String(name)} is missing`);
    for (const [name, member] of Object.entries(value)) {
      const own = name in known ? known[name] : 'additionalProperties' in schema ? schema.additionalProperties : true;
      found.push(...misfits(member, own, `${at}.${name}`));
      if ('propertyNames' in schema) found.push(...misfits(name, schema.propertyNames, `${at}.${name} (its name)`));
    }
  }
  return found;
}
