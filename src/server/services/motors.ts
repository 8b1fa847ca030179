import {
  fieldCurrentAtPanelA,
  NotConvergedError,
  operatingPoint,
  panelCurrentA,
  PullOutError,
  type CompletedMotor,
  type SynchronousMotor,
} from '../../core/machine';
import { wordNumber } from '../../core/units';
import type { MotorChangeInput, MotorInput, MotorView } from '../../schemas/motor';
import { freshen } from '../db/fresh';
import { inTx } from '../db/tx';
import { conflict, invalid, notFound, staleVersion, type FieldErrors } from '../errors';
import { Motor } from '../models/Motor';
import { Plan } from '../models/Plan';
import type { Actor } from '../policies/actor';
import { fieldWords } from '../presenters/field-words';
import { limitsOf, presentMotor, storedMotor } from '../presenters/motor';
import { motorSettings } from '../presenters/plan-row';
import { openEngagementById, type OpenEngagement } from './engagements';
import { completePlate, machineOrThrow } from './nameplates';
import { forgetLoad, loadSourcesOf, type StoredSource } from './load-sources';
import { ruleLoadKw, yearLoadOf, type LoadSource } from './shaft-load';

/** A motor's row opened by somebody who works on its engagement. */
export interface OpenMotor {
  motor: Motor;
  opened: OpenEngagement;
}

/** The motors of an engagement in their order. */
export const listMotors = (engagementId: number) =>
  Motor.findAll({ where: { engagementId }, order: ['position', 'id'] });

/** The motors with their present state and what they may give. */
export async function motorsOf(opened: OpenEngagement): Promise<MotorView[]> {
  return (await motorsWithLoads(opened)).map(({ view }) => view);
}

/** The same with what tells each one's load. */
export async function motorsWithLoads(opened: OpenEngagement): Promise<{ view: MotorView; source: LoadSource }[]> {
  const motors = await listMotors(opened.engagement.id);
  const sources = await loadSourcesOf(motors);
  return motors.map((motor, index) => {
    const source = sources[index]!;
    return { view: viewOf(motor, opened, source), source };
  });
}

/**
 * A motor's row by its id.
 *
 * @throws {ServiceError} 404 where there is none, or none this person may know of
 */
export async function openMotor(actor: Actor, id: number): Promise<OpenMotor> {
  const motor = await Motor.findByPk(id);
  if (!motor) throw notFound();
  return { motor, opened: await openEngagementById(actor, motor.engagementId) };
}

/**
 * Adds a motor.
 *
 * @throws {ServiceError} 422 where the plate contradicts itself, or today's field lies beyond a limit or below pull-out
 */
export async function createMotor(opened: OpenEngagement, input: MotorInput): Promise<MotorView> {
  const values = { ...checkedValues(input), meterId: meterFor(opened, input.meterId ?? opened.meter.id) };
  const engagementId = opened.engagement.id;
  const motor = await inTx(async () => {
    await refuseSameName(engagementId, input.name);
    const position = await Motor.count({ where: { engagementId } });
    return Motor.create({ ...values, engagementId, position });
  });
  return viewWithSource(motor, opened);
}

/**
 * Changes a motor.
 *
 * @throws {ServiceError} 409 with both versions where somebody saved in between; 422 as when it is added
 */
export async function changeMotor({ motor, opened }: OpenMotor, input: MotorChangeInput): Promise<MotorView> {
  const values = { ...checkedValues(input), meterId: meterFor(opened, input.meterId ?? motor.meterId) };
  await refuseBelowProfile(motor, input, values.fieldTodayA);
  const { version, ...mine } = input;
  await inTx(async () => {
    await refuseSameName(motor.engagementId, input.name, motor.id);
    await refuseStale(motor, version, mine);
    await motor.update(values);
  });
  return viewWithSource(motor, opened);
}

/**
 * Removes a motor no plan sets.
 *
 * @throws {ServiceError} 409 where a plan sets its field, naming it, or where it was changed in between
 */
export async function removeMotor({ motor }: OpenMotor, { version }: { version: number }): Promise<void> {
  await inTx(async () => {
    await refuseStale(motor, version, { version });
    const plans = await Plan.findAll({ where: { engagementId: motor.engagementId } });
    const setting = plans.filter((plan) => motorSettings(plan).some((field) => field.motorId === motor.id));
    if (setting.length > 0) {
      const named = setting.map((plan) => plan.name).join(', ');
      throw conflict(`${motor.name} is set by ${named}. Take it out of the plan first, or remove the plan.`);
    }
    await forgetLoad(motor.id);
    await motor.destroy();
  });
}

/** Refuses a change of a motor that somebody changed in between. Call it inside inTx. */
async function refuseStale(motor: Motor, version: number, mine: unknown): Promise<void> {
  await freshen(motor);
  if (motor.version !== version)
    throw staleVersion(`Motor ${motor.name}`, mine, storedMotor(motor, completePlate(motor.plate).motor));
}

/** @throws {ServiceError} 422 where the meter is none of those the engagement's bills are of */
function meterFor({ meters }: OpenEngagement, meterId: number): number {
  if (meters.some(({ id }) => id === meterId)) return meterId;
  throw invalid('The motor stands behind a meter that is not billed here.', {
    meterId: ['Choose one of the meters of this engagement.'],
  });
}

/** The columns of a row, after every check that can refuse it. */
function checkedValues(input: MotorInput) {
  const machine = machineOrThrow(input.plate);
  const fieldTodayA = fieldOfReading(machine, input);
  refuseField(machine, input, fieldTodayA);
  return {
    name: input.name,
    drives: input.drives || null,
    plate: input.plate,
    calendar: input.calendar,
    fieldTodayA,
  };
}

/** The machine's own field current of what was read at its panel. */
function fieldOfReading(machine: SynchronousMotor, input: MotorInput): number {
  if (input.fieldReadAt === 'field') return input.fieldTodayA;
  if (!machine.exciterField) {
    throw invalid('The reading at the panel cannot be turned into the motor’s field current.', {
      'plate.exciterFieldA': [
        'Write the exciter field current at rated field, or the reading of the motor’s own field.',
      ],
    });
  }
  return fieldCurrentAtPanelA(machine, input.fieldTodayA);
}

/** Refuses a field beyond its limit, or one that cannot hold the motor's loads. */
function refuseField(machine: SynchronousMotor, input: MotorInput, fieldA: number): void {
  const limitA = limitsOf(machine).fieldBeforeReserveA;
  const amperes = (value: number) => fieldWords(machine, value);
  if (fieldA > limitA * (1 + 1e-9)) {
    const over = panelCurrentA(machine, fieldA) - panelCurrentA(machine, limitA);
    throw invalid(`The field current today lies beyond the limit of ${input.name}.`, {
      fieldTodayA: [
        `${amperes(fieldA)} is ${wordNumber(over, machine.exciterField ? 0.01 : 0.1).replace(/\.0$/, '')} A beyond the field limit of ${input.name}, ${amperes(limitA)}. ` +
          'Read the ammeter again. If it is right the motor runs too hot: lower the field now, or correct the limit.',
      ],
    });
  }
  const fields: FieldErrors = {};
  input.calendar.rules.forEach((rule, index) => {
    const shaftKw = ruleLoadKw(rule, machine.ratedOutputKw);
    const fault = cannotHold(machine, shaftKw, fieldA);
    if (fault === null) return;
    const loadWords = `${wordNumber(shaftKw, 1)} kW (${wordNumber((100 * shaftKw) / machine.ratedOutputKw, 1)} % of rated)`;
    (fields[`calendar.rules.${index}.load`] ??= []).push(
      `At ${amperes(fieldA)} ${input.name} cannot carry ${loadWords}: it ${fault}. Check the load and the field current.`,
    );
    fields.fieldTodayA = [
      `At ${amperes(fieldA)} ${input.name} ${fault}, and its load reaches ${loadWords}. Read the ammeter at that load again.`,
    ];
  });
  if (Object.keys(fields).length > 0) throw invalid('Load and field current of today cannot both be right.', fields);
}

/** Refuses a field that cannot hold the loads of a profile. A submeter's loads are those that the field held. */
async function refuseBelowProfile(motor: Motor, { name, plate }: MotorInput, fieldTodayA: number): Promise<void> {
  const [source] = await loadSourcesOf([motor]);
  if (source?.kind !== 'profile') return;
  const machine = machineOrThrow(plate);
  const highestKw = Math.max(...source.calendar.rules.map((rule) => ruleLoadKw(rule, machine.ratedOutputKw)));
  const fault = cannotHold(machine, highestKw, fieldTodayA);
  if (fault === null) return;
  throw invalid('Load and field current of today cannot both be right.', {
    fieldTodayA: [
      `At ${fieldWords(machine, fieldTodayA)} ${name} ${fault}, and its profile reaches ${wordNumber(highestKw, 1)} kW. Read the ammeter at that load again, or correct the profile.`,
    ],
  });
}

/** Why a field current cannot hold a load; null where it can. */
export function cannotHold(machine: SynchronousMotor, shaftKw: number, fieldCurrentA: number): string | null {
  try {
    operatingPoint(machine, { shaftKw, fieldCurrentA });
    return null;
  } catch (error) {
    if (error instanceof PullOutError) {
      return `falls out of step above ${wordNumber(error.pullOutPowerW / 1000, 1)} kW`;
    }
    if (error instanceof NotConvergedError) return 'draws more current than it can carry';
    throw error;
  }
}

async function refuseSameName(engagementId: number, name: string, except?: number): Promise<void> {
  const same = await Motor.findOne({ where: { engagementId, name } });
  if (same && same.id !== except) {
    throw invalid('Two motors of one plant cannot have the same name.', {
      name: [`There is a motor ${name} already. Give this one another name.`],
    });
  }
}

/** What a stored motor is to the calculations: its loads over the year. */
export function loadOf(motor: Motor, machine: SynchronousMotor, opened: OpenEngagement, source: LoadSource) {
  const { yearFrom: from, yearTo: to } = opened.engagement;
  const running = { ...source, machine, fieldTodayA: motor.fieldTodayA };
  const load = yearLoadOf(running, { from, to, timeZone: opened.site.timeZone });
  const { hours } = load;
  const usualShaftKw = hours[0]?.shaftKw ?? ruleLoadKw(motor.calendar.rules[0]!, machine.ratedOutputKw);
  return { ...load, usualShaftKw, hoursRunning: hours.reduce((sum, one) => sum + one.hours, 0) };
}

/**
 * The machine of a stored motor with what was assumed.
 *
 * @throws {ServiceError} 409 where its plate can no longer be read
 */
export function completedOf({ name, plate }: Motor): CompletedMotor & { motor: SynchronousMotor } {
  const completed = completePlate(plate);
  const { motor } = completed;
  if (!motor) throw conflict(`The plate of ${name} can no longer be read. Open it at the station Motors.`);
  return { ...completed, motor };
}

function viewOf(motor: Motor, opened: OpenEngagement, source: StoredSource): MotorView {
  const completed = completedOf(motor);
  const load = { ...loadOf(motor, completed.motor, opened, source), source: source.kind };
  return presentMotor(motor, completed, load);
}

async function viewWithSource(motor: Motor, opened: OpenEngagement): Promise<MotorView> {
  const [source] = await loadSourcesOf([motor]);
  return viewOf(motor, opened, source!);
}
