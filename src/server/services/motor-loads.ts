import { compareLoadTest } from '../../core/plan';
import { wordNumber } from '../../core/units';
import { profileDays, type LoadSource, type ShaftLoadInput, type ShaftLoadView } from '../../schemas/shaft-load';
import { freshen } from '../db/fresh';
import { inTx } from '../db/tx';
import { invalid, staleVersion, type FieldErrors } from '../errors';
import { MotorLoad } from '../models/MotorLoad';
import { SubmeterFile } from '../models/SubmeterFile';
import { presentLoadTest, presentShaftLoad, toLoadTestRow } from '../presenters/shaft-load';
import { fieldWords } from '../presenters/field-words';
import { assertNotClosed } from './intake-guard';
import { loadSourcesOf, submeterFiles } from './load-sources';
import { cannotHold, completedOf, loadOf, type OpenMotor } from './motors';

/** Where a motor's load comes from, what that gives over the year, and what its load test says. */
export async function shaftLoadViewOf({ motor, opened }: OpenMotor): Promise<ShaftLoadView> {
  const row = await MotorLoad.findOne({ where: { motorId: motor.id } });
  const [[source], files] = await Promise.all([loadSourcesOf([motor]), submeterFiles(motor.id)]);
  const completed = completedOf(motor);
  const tested = (row?.loadTest ?? []).map((one) => toLoadTestRow(completed.motor, one));
  return presentShaftLoad({
    motorId: motor.id,
    row,
    files,
    load: loadOf(motor, completed.motor, opened, source!),
    test: tested.length === 0 ? null : presentLoadTest(completed, compareLoadTest(completed.motor, tested)),
  });
}

/**
 * Changes where a motor's load comes from, and its load test.
 *
 * @throws {ServiceError} 409 where the engagement is closed or somebody saved in between; 422 where today's field cannot hold a
 *   load of the profile, or no file of a submeter is there
 */
export async function changeShaftLoad(found: OpenMotor, input: ShaftLoadInput): Promise<ShaftLoadView> {
  const { motor, opened } = found;
  assertNotClosed(opened);
  refuseProfile(found, input);
  const { version, ...values } = input;
  await inTx(async () => {
    if (input.source === 'submeter') await refuseWithoutFile(motor.id);
    const row = await rowOf(motor.id);
    if (row.version !== version) {
      const { source, profile, whenMissing, loadTest } = row;
      const theirs = { version: row.version, source, profile, whenMissing, loadTest };
      throw staleVersion(`The shaft load of ${motor.name}`, values, theirs);
    }
    // The version goes up also where nothing else changed: who saw the one before is told.
    row.changed('source', true);
    await row.update(values);
  });
  return shaftLoadViewOf(found);
}

/** Sets what tells a motor's load, whatever the version. Call inside inTx. */
export async function keepSource(motorId: number, source: LoadSource): Promise<void> {
  await (await rowOf(motorId)).update({ source });
}

/** The row of a motor's load, made where there is none. Call inside inTx. */
async function rowOf(motorId: number): Promise<MotorLoad> {
  const row = await MotorLoad.findOne({ where: { motorId } });
  if (row) return freshen(row);
  return MotorLoad.create({ motorId, source: 'calendar', profile: null, whenMissing: 'calendar', loadTest: [] });
}

async function refuseWithoutFile(motorId: number): Promise<void> {
  if ((await SubmeterFile.count({ where: { motorId } })) > 0) return;
  throw invalid('No file of a submeter is here yet.', { source: ['Bring in the submeter’s file first.'] });
}

/** Refuses a profile with loads that today's field cannot hold. */
function refuseProfile({ motor }: OpenMotor, { source, profile }: ShaftLoadInput): void {
  if (source !== 'profile' || !profile) return;
  const { motor: machine } = completedOf(motor);
  const fields: FieldErrors = {};
  for (const day of profileDays) {
    profile[day].forEach((load, hour) => {
      const shaftKw = profile.unit === 'kW' ? load : (load / 100) * machine.ratedOutputKw;
      const fault = shaftKw > 0 ? cannotHold(machine, shaftKw, motor.fieldTodayA) : null;
      if (fault === null) return;
      const words = `At ${fieldWords(machine, motor.fieldTodayA)} ${motor.name} cannot carry ${wordNumber(shaftKw, 1)} kW: it ${fault}.`;
      fields[`profile.${day}.${hour}`] = [`${words} Check the load, or the field current of today.`];
    });
  }
  if (Object.keys(fields).length > 0)
    throw invalid('Load and field current of today cannot both be right.', fields);
}
