import type { JsonSchema } from './schema';

const isSchema = (value: unknown): value is JsonSchema => typeof value === 'object' && value !== null;

/** The same schema with fields that are described several times told once, under `definitions`. */
export function withDefinitions(schema: JsonSchema): JsonSchema {
  const counts = new Map<string, number>();
  eachField(schema, (_, field) => {
    const text = JSON.stringify(field);
    counts.set(text, (counts.get(text) ?? 0) + 1);
  });
  const names = new Map<string, string>();
  eachField(schema, (name, field) => {
    const text = JSON.stringify(field);
    if (names.has(text) || counts.get(text)! < 2) return;
    const taken = [...names.values()].filter((other) => other.replace(/\d+$/, '') === name).length;
    names.set(text, taken === 0 ? name : `${name}${taken + 1}`);
  });
  const definitions = [...names].map(([text, name]) => [name, inside(JSON.parse(text), names)] as const);
  return { ...(inside(schema, names) as JsonSchema), definitions: Object.fromEntries(definitions) };
}

/** Calls `visit` for every field's schema, outer ones first. */
function eachField(value: unknown, visit: (name: string, field: JsonSchema) => void): void {
  if (!isSchema(value)) return;
  for (const [name, field] of Object.entries(fieldsOf(value))) visit(name, field);
  for (const inner of Object.values(value)) eachField(inner, visit);
}

/** Fields of an object's schema: `properties` whose values are schemas, not the property of that name. */
function fieldsOf({ type, properties }: JsonSchema): Record<string, JsonSchema> {
  return type === 'object' && isSchema(properties) ? (properties as Record<string, JsonSchema>) : {};
}

/** A value with its fields replaced by references where they are told under `definitions`. */
function inside(value: unknown, names: ReadonlyMap<string, string>): unknown {
  if (Array.isArray(value)) return value.map((item) => inside(item, names));
  if (!isSchema(value)) return value;
  const replaced = (field: JsonSchema): unknown => {
    const name = names.get(JSON.stringify(field));
    return name === undefined ? inside(field, names) : { $ref: `#/definitions/${name}` };
  };
  const isObject = Object.keys(fieldsOf(value)).length > 0;
  return Object.fromEntries(
    Object.entries(value).map(([key, inner]) => [
      key,
      isObject && key === 'properties'
        ? Object.fromEntries(Object.entries(inner as Record<string, JsonSchema>).map(([n, f]) => [n, replaced(f)]))
        : inside(inner, names),
    ]),
  );
}
