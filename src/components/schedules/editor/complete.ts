import type { Completion, CompletionContext, CompletionResult } from '@codemirror/autocomplete';
import { scheduleGrammar, takesAt, type Field, type NameOf, type Takes } from '../../../core/tariff/grammar';
import { namesIn, placeAt, type TextNames } from './text-place';

/** Sections whose names a place may hold. */
const sectionsOf: Record<NameOf, string[]> = {
  window: ['windows'],
  season: ['seasons'],
  contract: ['contract'],
  quantity: ['quantities'],
  given: ['quantities'],
  measure: ['quantities'],
  line: ['charges'],
  figure: ['quantities', 'charges'],
  history: ['quantities', 'charges'],
  entry: ['quantities', 'charges'],
};

const sectionWords: Record<string, string> = {
  windows: 'window',
  seasons: 'season',
  contract: 'contract input',
  rates: 'rate',
  quantities: 'quantity',
  charges: 'line of the bill',
};

const namesOf = (names: TextNames, sections: string[]): Completion[] =>
  sections.flatMap((section) =>
    (names.get(section) ?? []).map((name) => ({ label: name, detail: sectionWords[section] ?? section })),
  );

const infoOf = ({ about, leftOut, example }: Field) =>
  [about, leftOut && `Left out: ${leftOut}.`, `For example ${example}`].filter(Boolean).join(' ');

const fieldOption = (field: Field): Completion => ({
  label: field.name,
  apply: `${field.name}: `,
  detail: field.isRequired ? 'must be said' : undefined,
  info: infoOf(field),
  boost: field.isRequired ? 10 : 0,
});

/** Keys a set may have at this place, without those it has. */
function keysOf(takes: Takes, has: string[], names: TextNames): Completion[] {
  switch (takes.kind) {
    case 'set':
      return takes.fields.filter(({ name }) => !has.includes(name)).map(fieldOption);
    case 'kinds': {
      const said = takes.kinds.find(({ name }) => has.includes(name));
      const fields = said ? said.fields : takes.kinds.flatMap((kind) => kind.fields.slice(0, 1));
      return [...fields, ...takes.common].filter(({ name }) => !has.includes(name)).map(fieldOption);
    }
    case 'entries':
      return takes.key in sectionsOf ? asKeys(namesOf(names, sectionsOf[takes.key as NameOf]), has) : [];
    case 'place':
      return asKeys(
        namesOf(
          names,
          takes.by.flatMap((what) => (what === 'month' ? [] : [`${what}s`])),
        ),
        has,
      );
    case 'either':
      return takes.of.flatMap((inner) => keysOf(inner, has, names));
    case 'list':
      return keysOf(takes.of, has, names);
    default:
      return [];
  }
}

const asKeys = (options: Completion[], has: string[]): Completion[] =>
  options.filter(({ label }) => !has.includes(label)).map((option) => ({ ...option, apply: `${option.label}: ` }));

const functionOptions: Completion[] = scheduleGrammar.functions.map(({ name, form, about }) => ({
  label: form,
  apply: `${name}(`,
  detail: 'function',
  info: about,
}));
const channelOptions: Completion[] = scheduleGrammar.channels.map(({ name, unit, about }) => ({
  label: name,
  detail: `channel, ${unit}`,
  info: about,
}));
const factOptions: Completion[] = scheduleGrammar.facts.map(({ name, about }) => ({
  label: name,
  detail: 'of the period',
  info: about,
}));

function formulaOptions(reads: 'quantities' | 'channels' | 'past', names: TextNames): Completion[] {
  const made = namesOf(names, ['quantities', 'rates', 'contract']);
  const lines = namesOf(names, ['charges']);
  return [...(reads === 'channels' ? channelOptions : []), ...made, ...lines, ...functionOptions, ...factOptions];
}

/** Values that may stand at this place. */
function valuesOf(takes: Takes, names: TextNames): Completion[] {
  switch (takes.kind) {
    case 'word':
      return takes.words.map((word) => ({ label: word }));
    case 'written':
      return takes.forms.map((form) => ({ label: form }));
    case 'name':
      return namesOf(names, sectionsOf[takes.of]);
    case 'formula':
      return formulaOptions(takes.reads, names);
    case 'place':
      return formulaOptions('quantities', names);
    case 'list':
      return valuesOf(takes.of, names);
    case 'either':
      return takes.of.flatMap((inner) => valuesOf(inner, names));
    default:
      return [];
  }
}

/** What may be written at the cursor, from the table of fields the reader itself uses. */
export function completeSchedule(context: CompletionContext): CompletionResult | null {
  const text = context.state.doc.toString();
  const word = context.matchBefore(/[A-Za-z0-9]*/);
  const from = word?.from ?? context.pos;
  const { path, kind, keys } = placeAt(text, from);
  const takes = takesAt(path);
  if (!takes || (word?.text === '' && !context.explicit)) return null;
  const names = namesIn(text);
  const all = kind === 'key' ? keysOf(takes, keys, names) : valuesOf(takes, names);
  const options = [...new Map(all.map((option) => [option.label, option])).values()];
  return options.length === 0 ? null : { from, options, validFor: /^[A-Za-z0-9]*$/ };
}
