import { scheduleGrammar } from './grammar';
import type { Field, Kind, Takes } from './grammar/types';
import { withDefinitions } from './schema-definitions';

/** A JSON Schema or a part of one. */
export type JsonSchema = { [keyword: string]: unknown };

/** Whole entries, or what a version changes of them: nothing is required there, and fields may be removed. */
type Mode = 'whole' | 'change';

const namePattern = '^[a-z][A-Za-z0-9]*$';
const datePattern = '^\\d{4}-\\d{2}-\\d{2}$';
const keyPatterns: Partial<Record<string, string>> = {
  own: namePattern,
  date: datePattern,
  month: '^\\d{4}-(0[1-9]|1[0-2])$',
  step: '^-?\\d+(\\.\\d+)?$',
};
const single: JsonSchema = { type: ['string', 'number', 'boolean'], minLength: 1 };
const formula: JsonSchema = { type: ['number', 'string'], minLength: 1 };
const removed: JsonSchema = { const: 'removed' };

/**
 * A JSON Schema of schedule files, made from the table of fields: for editors to complete and check while one types.
 *
 * It knows shapes and words, not names: what it takes the reader may still refuse, what it refuses the reader refuses too.
 *
 * @returns draft 07, as plain JSON
 */
export function scheduleJsonSchema(): JsonSchema {
  return withDefinitions({
    $schema: 'http://json-schema.org/draft-07/schema#',
    title: 'Schedule',
    description: 'A tariff in the schedule language.',
    ...setSchema(scheduleGrammar.parts, 'whole'),
  });
}

function setSchema(fields: readonly Field[], mode: Mode, mayBeRemoved = mode === 'change'): JsonSchema {
  const said = fields.filter(({ onlyInVersions }) => mode === 'change' || !onlyInVersions);
  const required = mode === 'whole' ? said.filter(({ isRequired }) => isRequired).map(({ name }) => name) : [];
  return {
    type: 'object',
    properties: Object.fromEntries(said.map((field) => [field.name, fieldSchema(field, mode, mayBeRemoved)])),
    ...(required.length > 0 && { required }),
    ...(mode === 'whole' && needsOf(said)),
    additionalProperties: false,
  };
}

function needsOf(fields: readonly Field[]): JsonSchema {
  const needs = fields.flatMap(({ name, needs: other }) => (other === undefined ? [] : [[name, [other]] as const]));
  return needs.length > 0 ? { dependencies: Object.fromEntries(needs) } : {};
}

function fieldSchema(field: Field, mode: Mode, mayBeRemoved: boolean): JsonSchema {
  const { name, about, takes, leftOut, example, onlyInVersions } = field;
  const description = `${about}${leftOut === undefined ? '' : ` Left out: ${leftOut}.`} Example: ${name}: ${example}`;
  const schema = schemaOf(takes, mode);
  return { description, ...(mayBeRemoved && !onlyInVersions ? { anyOf: [schema, removed] } : schema) };
}

function schemaOf(takes: Takes, mode: Mode): JsonSchema {
  switch (takes.kind) {
    case 'text':
      return single;
    case 'number':
      return { type: 'number' };
    case 'date':
      return { type: 'string', pattern: datePattern };
    case 'word':
      return takes.isOpen ? { ...single, examples: [...takes.words] } : { enum: [...takes.words] };
    case 'written':
      return {
        type: takes.isNumberToo ? ['string', 'number'] : 'string',
        pattern: takes.pattern,
        examples: [...takes.forms],
      };
    case 'formula':
      return formula;
    case 'place':
      return placeSchema(takes.by);
    case 'name':
      return { type: 'string', minLength: 1 };
    case 'set':
      return setSchema(takes.fields, mode);
    case 'kinds':
      return mode === 'change' ? setSchema(unionOf(takes.kinds, takes.common), mode) : kindsSchema(takes);
    case 'entries':
      return entriesSchema(takes, mode);
    case 'list':
      return listSchema(takes);
    case 'either':
      return { anyOf: takes.of.map((inner) => schemaOf(inner, mode)) };
  }
}

function listSchema({ of, least = 1, most, mayStandAlone }: Takes & { kind: 'list' }): JsonSchema {
  const items = schemaOf(of, 'whole');
  const list: JsonSchema = { type: 'array', items, minItems: least, ...(most !== undefined && { maxItems: most }) };
  return mayStandAlone ? { anyOf: [items, list] } : list;
}

function entriesSchema({ key, of }: Takes & { kind: 'entries' }, mode: Mode): JsonSchema {
  const pattern = keyPatterns[key];
  const inside = key === 'date' && of.kind === 'set' ? setSchema(of.fields, 'change', false) : schemaOf(of, mode);
  const isAdded = mode === 'change' && key === 'own';
  return {
    // A section that holds nothing yet.
    type: key === 'own' ? ['object', 'null'] : 'object',
    ...(pattern !== undefined && { propertyNames: { pattern } }),
    additionalProperties: isAdded ? { anyOf: [inside, removed] } : inside,
  };
}

function kindsSchema({ kinds, common }: Takes & { kind: 'kinds' }): JsonSchema {
  return {
    anyOf: kinds.map(({ name, about, fields, oneOf }) => ({
      title: name,
      description: about,
      ...setSchema([...fields, ...common], 'whole'),
      ...(oneOf && { oneOf: oneOf.map((field) => ({ required: [field] })) }),
    })),
  };
}

/** Fields of all kinds, each name once. */
function unionOf(kinds: readonly Kind[], common: readonly Field[]): Field[] {
  const all = [...kinds.flatMap(({ fields }) => fields), ...common];
  return all.filter((field, i) => all.findIndex(({ name }) => name === field.name) === i);
}

function placeSchema(by: readonly ('window' | 'season' | 'month')[]): JsonSchema {
  const bySeason: JsonSchema = { type: 'object', minProperties: 1, additionalProperties: formula };
  const months = { type: 'object', minProperties: 1, propertyNames: { pattern: keyPatterns.month } };
  const byMonth: JsonSchema = {
    type: 'object',
    properties: { months: { ...months, additionalProperties: formula } },
    required: ['months'],
    additionalProperties: false,
  };
  const byWindow = { ...bySeason, additionalProperties: { anyOf: [formula, bySeason] } };
  const maps = by.includes('window') ? [byWindow] : [bySeason];
  return { anyOf: [formula, ...maps, ...(by.includes('month') ? [byMonth] : [])] };
}
