import { checkExamples } from '../../core/tariff';
import type { LibraryEntry } from '../../schemas/tariff';
import type { ExampleView, RevisionView } from '../../schemas/schedule-editor';
import type { ScheduleSheetView } from '../../schemas/schedule-sheet';
import type { Actor } from '../policies/actor';
import { presentExample } from '../presenters/schedule-check';
import { presentScheduleSheet } from '../presenters/schedule-sheet';
import { presentLibraryEntry } from '../presenters/tariff';
import type { ScheduleFile } from './schedule-files';
import { draftOf, othersWriting } from './schedule-drafts';
import { scheduleHistory } from './schedule-history';
import { listForms, listPutAway, listScheduleFiles, openForm, scheduleUses, type ScheduleUse } from './schedules';

/** A row of the library: the schedule and where it is used. */
export interface LibraryRow extends LibraryEntry {
  revision: number | null;
  uses: (ScheduleUse & { isCurrent: boolean })[];
}

/** The library with where each schedule is used, and what is put away. Staff only. */
export async function libraryPage(actor: Actor): Promise<{ library: LibraryRow[]; away: LibraryRow[]; forms: number }> {
  const [files, away, uses, forms] = await Promise.all([
    listScheduleFiles(actor),
    listPutAway(actor),
    scheduleUses(actor),
    listForms(actor),
  ]);
  const rowOf = (file: (typeof files)[number]): LibraryRow => ({
    ...presentLibraryEntry(file),
    revision: file.revision,
    uses: (uses.get(file.id) ?? []).map((use) => ({ ...use, isCurrent: use.sha256 === file.sha256 })),
  });
  return { library: files.map(rowOf), away: away.map(rowOf), forms: forms.length };
}

/** Everything the page of one schedule shows. */
export interface SchedulePage {
  view: ScheduleSheetView;
  examples: ExampleView[];
  uses: LibraryRow['uses'];
  /** The kept text it shows; null for a file of the folder. */
  revision: RevisionView | null;
  putAway: { isAway: boolean; version: number } | null;
  writing: { mine: boolean; others: string[] };
}

/** One schedule as its page reads, where it is used and who is changing it. */
export async function schedulePage(actor: Actor, id: string, today: string): Promise<SchedulePage> {
  const { file, schedule, revisions } = await scheduleHistory(actor, id);
  const [uses, draft, others] = await Promise.all([scheduleUses(actor), draftOf(actor, id), othersWriting(actor, id)]);
  return {
    view: presentScheduleSheet(file, today),
    examples: examplesOf(file),
    uses: (uses.get(id) ?? []).map((use) => ({ ...use, isCurrent: use.sha256 === file.sha256 })),
    revision: revisions[0] ?? null,
    putAway: schedule && { isAway: schedule.putAwayAt !== null, version: schedule.version },
    writing: { mine: draft !== null, others },
  };
}

/** The worked bills of a text with what comes out. */
function examplesOf({ schedule, text }: ScheduleFile): ExampleView[] {
  return schedule ? checkExamples(schedule).map((example) => presentExample(example, text)) : [];
}

/** A form of the library: what it charges, in the first words it says of itself, and where it stands among the others. */
export interface FormRow extends LibraryEntry {
  about: string;
  group: string;
}

/** What forms charge on, by the first word of their ids, in the order they are listed. */
const formGroups: [group: string, words: string[]][] = [
  ['Demand in kVA, or in kW raised by power factor', ['kva', 'kw']],
  ['Reactive demand, kvar', ['kvar']],
  ['Reactive energy, kvarh', ['kvarh', 'hourly']],
  ['Percentages of charges', ['percent', 'base', 'surcharge']],
  ['Price of energy', ['kvah', 'kwh']],
];
const otherForms = 'Others';

function groupOf(id: string): string {
  const [word = ''] = id.split('-');
  return formGroups.find(([, words]) => words.includes(word))?.[0] ?? otherForms;
}

/** The forms by what they charge on. Staff only. */
export async function formsPage(actor: Actor): Promise<FormRow[]> {
  const order = [...formGroups.map(([group]) => group), otherForms];
  const rows = (await listForms(actor)).map((file) => ({
    ...presentLibraryEntry(file),
    about: aboutOf(file.text)[0] ?? '',
    group: groupOf(file.id),
  }));
  return rows.sort((a, b) => order.indexOf(a.group) - order.indexOf(b.group));
}

/** One form as its page reads. @throws {ServiceError} 404 where there is none of that id */
export async function formPage(
  actor: Actor,
  id: string,
  today: string,
): Promise<{ view: ScheduleSheetView; examples: ExampleView[]; about: string[] }> {
  const file = await openForm(actor, id);
  return { view: presentScheduleSheet(file, today), examples: examplesOf(file), about: aboutOf(file.text) };
}

/** The paragraphs of the comment at the head of a text; notes to editors left out. */
function aboutOf(text: string): string[] {
  const lines = text.split('\n');
  const end = lines.findIndex((line) => line !== '' && !line.startsWith('#'));
  const head = lines.slice(0, Math.max(0, end)).filter((line) => !line.startsWith('# yaml-language-server'));
  const paragraphs = head
    .map((line) => line.replace(/^#\s?/, ''))
    .join('\n')
    .split(/\n\s*\n/);
  return paragraphs.map((paragraph) => paragraph.replaceAll('\n', ' ').trim()).filter((paragraph) => paragraph !== '');
}

/** What a schedule of one's own can begin from: a blank, a form, another schedule that can be read. Staff only. */
export async function beginnings(actor: Actor): Promise<{ value: string; label: string }[]> {
  const [forms, files] = await Promise.all([listForms(actor), listScheduleFiles(actor)]);
  const label = (title: string, publisher: string | undefined) => (publisher ? `${title}, ${publisher}` : title);
  return [
    { value: 'blank', label: 'Nothing: three lines to overwrite' },
    ...forms.flatMap(({ id, schedule }) =>
      schedule ? [{ value: `form:${id}`, label: `Form: ${schedule.title}` }] : [],
    ),
    ...files.flatMap(({ id, schedule }) =>
      schedule ? [{ value: `schedule:${id}`, label: label(schedule.title, schedule.source.publisher) }] : [],
    ),
  ];
}
