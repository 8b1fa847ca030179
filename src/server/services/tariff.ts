import { readSchedule, ScheduleError } from '../../core/tariff';
import type { Schedule } from '../../core/tariff';
import type { PricedYear } from '../../schemas/pricing';
import {
  contractSchema,
  noLine,
  type ChoiceView,
  type ChooseInput,
  type LibraryEntry,
  type LineMatchInput,
} from '../../schemas/tariff';
import { freshen } from '../db/fresh';
import { inTx } from '../db/tx';
import { conflict, invalid, ServiceError, staleVersion, type FieldErrors } from '../errors';
import { TariffChoice } from '../models/TariffChoice';
import type { Actor } from '../policies/actor';
import { contractFields, historyFields } from '../presenters/schedule';
import { presentChoice, presentLibraryEntry, withDefaults } from '../presenters/tariff';
import { openEngagement, type OpenEngagement } from './engagements';
import { remember, rememberedMatches } from './line-memory';
import { pricedYear } from './pricing';
import { digestOf, type ScheduleFile } from './schedule-files';
import { listScheduleFiles } from './schedules';

/** Why the year is not priced, and the station that mends it. */
export interface Obstacle {
  message: string;
  station: 'bills' | 'intervals' | 'tariff';
}

/** Everything the station Tariff shows. */
export interface TariffStation {
  opened: OpenEngagement;
  library: LibraryEntry[];
  choice: ChoiceView | null;
  year: PricedYear | null;
  obstacle: Obstacle | null;
}

/** Opens the station: the library, the choice, and the year priced as far as it can be. */
export async function tariffStation(actor: Actor, code: string): Promise<TariffStation> {
  const opened = await openEngagement(actor, code);
  const files = await listScheduleFiles(actor);
  const choice = await choiceOf(opened);
  const priced = await pricedOrObstacle(opened);
  return {
    opened,
    library: files.map(presentLibraryEntry),
    choice: choice && viewOf(choice, files),
    ...priced,
  };
}

async function pricedOrObstacle(opened: OpenEngagement): Promise<Pick<TariffStation, 'year' | 'obstacle'>> {
  try {
    return { year: await pricedYear(opened), obstacle: null };
  } catch (error) {
    if (!(error instanceof ServiceError) || error.status !== 409) throw error;
    const station = error.details?.station;
    const known = station === 'bills' || station === 'intervals' ? station : 'tariff';
    return { year: null, obstacle: { message: error.message, station: known } };
  }
}

const choiceOf = ({ engagement }: OpenEngagement) => TariffChoice.findOne({ where: { engagementId: engagement.id } });

function viewOf(choice: TariffChoice, files: ScheduleFile[]): ChoiceView {
  const file = files.find((one) => one.id === choice.scheduleId);
  const schedule = file?.sha256 === choice.sha256 ? file.schedule : readOrNull(choice.scheduleText);
  return presentChoice(choice, schedule, file?.sha256 ?? null);
}

function readOrNull(text: string): Schedule | null {
  try {
    return readSchedule(text);
  } catch (error) {
    if (error instanceof ScheduleError) return null;
    throw error;
  }
}

/**
 * Chooses the schedule an engagement is priced on and freezes its text.
 *
 * @throws {ServiceError} 422 by field for contract inputs and history the schedule does not take, 409 for a version meanwhile changed
 */
export async function chooseSchedule(actor: Actor, code: string, input: ChooseInput): Promise<ChoiceView> {
  const opened = await openEngagement(actor, code);
  const files = await listScheduleFiles(actor);
  const current = await choiceOf(opened);
  const { text, schedule } = textToFreeze(input, current, files);
  if (schedule.currency !== opened.engagement.currency) {
    throw invalid('This schedule does not fit the engagement.', {
      scheduleId: [`It prices in ${schedule.currency}; the engagement is in ${opened.engagement.currency}.`],
    });
  }
  const values = {
    scheduleId: schedule.id,
    scheduleText: text,
    sha256: digestOf(text),
    contract: checkContract(schedule, input.contract),
    history: checkHistory(schedule, input.history),
    ...(input.toleranceMinor === undefined ? {} : { toleranceMinor: input.toleranceMinor }),
  };
  const saved = await inTx(() => save(opened, schedule, values, input));
  return viewOf(saved, files);
}

type Frozen = Pick<TariffChoice, 'scheduleId' | 'scheduleText' | 'sha256' | 'contract' | 'history'>;

async function save(opened: OpenEngagement, schedule: Schedule, values: Frozen, input: ChooseInput) {
  const current = await choiceOf(opened);
  const engagementId = opened.engagement.id;
  if (!current)
    return TariffChoice.create({ ...values, engagementId, ...(await rememberedMatches(schedule, engagementId)) });
  refuseStale(current, input.version, values);
  const matches = current.scheduleId === values.scheduleId ? {} : await rememberedMatches(schedule, engagementId);
  return current.update({ ...values, ...matches });
}

function refuseStale(current: TariffChoice, seen: number | null, mine: unknown): void {
  if (current.version === seen) return;
  const { scheduleId, contract, history, lineMatches, version } = current;
  throw staleVersion('The choice of the schedule', mine, { scheduleId, contract, history, lineMatches, version });
}

/** The text kept with the engagement where the same schedule is kept, else the library's file. */
function textToFreeze(input: ChooseInput, current: TariffChoice | null, files: ScheduleFile[]) {
  if (current?.scheduleId === input.scheduleId && !input.takeNewText) {
    const schedule = readOrNull(current.scheduleText);
    if (schedule) return { text: current.scheduleText, schedule };
  }
  const file = files.find((one) => one.id === input.scheduleId);
  if (!file) {
    throw invalid('This schedule is not in the library.', {
      scheduleId: [`There is no schedule "${input.scheduleId}" in the library. Choose one of the list.`],
    });
  }
  if (!file.schedule) {
    const [first] = file.problems;
    const where = first ? `${file.fileName}:${first.line}:${first.column} ${first.message}` : file.fileName;
    throw invalid(
      'This schedule cannot be read.',
      { scheduleId: [`Mend its file first: ${where}`] },
      { problems: file.problems },
    );
  }
  return { text: file.text, schedule: file.schedule };
}

function checkContract(schedule: Schedule, told: Record<string, number>): Record<string, number> {
  const fields = contractFields(schedule);
  const parsed = contractSchema(fields).safeParse(told);
  if (parsed.success) return withDefaults(fields, told);
  const errors: FieldErrors = {};
  for (const issue of parsed.error.issues) {
    const names = issue.code === 'unrecognized_keys' ? issue.keys : [String(issue.path[0])];
    for (const name of names) {
      const message =
        issue.code === 'unrecognized_keys' ? `The schedule has no contract input "${name}".` : issue.message;
      (errors[`contract.${name}`] ??= []).push(message);
    }
  }
  throw invalid('Some contract inputs cannot be used. Each is marked with what to change.', errors);
}

function checkHistory(schedule: Schedule, told: ChooseInput['history']): Record<string, number[]> | null {
  if (!told) return null;
  const known = new Map(historyFields(schedule).map((field) => [field.name, field]));
  const errors: FieldErrors = {};
  for (const [name, values] of Object.entries(told)) {
    const field = known.get(name);
    if (!field) errors[`history.${name}`] = [`The schedule does not look back at "${name}".`];
    else if (values.some((value) => !Number.isFinite(value) || value < 0)) {
      errors[`history.${name}`] = [`${field.label} of earlier months is a number, nought or more.`];
    }
  }
  if (Object.keys(errors).length > 0) throw invalid('Some earlier months cannot be used.', errors);
  const filled = Object.entries(told).filter(([, values]) => values.length > 0);
  return filled.length > 0 ? Object.fromEntries(filled) : null;
}

/**
 * Remembers which line of the schedule a printed label means, here and for the utility's next engagement; null forgets it.
 *
 * @throws {ServiceError} 409 where no schedule is chosen or the choice changed meanwhile, 422 for an unknown line
 */
export async function matchLine(actor: Actor, code: string, input: LineMatchInput): Promise<ChoiceView> {
  const opened = await openEngagement(actor, code);
  const files = await listScheduleFiles(actor);
  const choice = await choiceOf(opened);
  if (!choice)
    throw conflict('No tariff schedule is chosen yet. Choose one at the station Tariff.', { station: 'tariff' });
  const schedule = readOrNull(choice.scheduleText);
  if (input.lineId !== null && input.lineId !== noLine && !schedule?.lineOrder.includes(input.lineId)) {
    throw invalid('This line cannot be matched.', { lineId: [`The schedule has no line "${input.lineId}".`] });
  }
  await inTx(async () => {
    refuseStale(await freshen(choice), input.version, { [input.label]: input.lineId });
    const { [input.label]: _former, ...others } = choice.lineMatches;
    const { [input.label]: _origin, ...remembered } = choice.remembered;
    const lineMatches = input.lineId === null ? others : { ...others, [input.label]: input.lineId };
    await choice.update({ lineMatches, remembered });
    if (schedule) await remember(schedule, opened.engagement.id, input);
  });
  return viewOf(choice, files);
}
