import type { MeterInput, MetersView, MeterView } from '../../schemas/engagement';
import { inTx } from '../db/tx';
import { conflict, invalid, notFound } from '../errors';
import { EngagementMeter } from '../models/EngagementMeter';
import { Intake } from '../models/Intake';
import { Meter } from '../models/Meter';
import { Motor } from '../models/Motor';
import { openForChange } from './intake-guard';
import type { Actor } from '../policies/actor';
import { openEngagement, type OpenEngagement } from './engagements';

/** A meter as lists show it. */
export const presentMeter = ({ id, label, serviceVoltageKv }: Meter): MeterView => ({ id, label, serviceVoltageKv });

/** The meters of an engagement, and those of its site that could be billed together with them. */
export async function metersOf({ meters, site }: OpenEngagement): Promise<MetersView> {
  const all = await Meter.findAll({ where: { siteId: site.id }, order: ['label'] });
  const taken = new Set(meters.map(({ id }) => id));
  return { meters: meters.map(presentMeter), others: all.filter(({ id }) => !taken.has(id)).map(presentMeter) };
}

/**
 * Adds a meter of the site to those billed together.
 *
 * @throws {ServiceError} 404 for those who do not work on the engagement; 409 where it is closed; 422 where the meter is none of its site
 */
export async function addMeter(actor: Actor, code: string, input: MeterInput): Promise<MetersView> {
  const opened = await openForChange(actor, code);
  const { engagement, meters, site } = opened;
  await inTx(async () => {
    const meter = await meterFor(opened, input);
    if (meters.some(({ id }) => id === meter.id)) throw conflict(`${meter.label} is among the meters already.`);
    await EngagementMeter.create({ engagementId: engagement.id, meterId: meter.id });
  });
  return metersOf({ ...(await openEngagement(actor, code)), site });
}

async function meterFor({ site }: OpenEngagement, input: MeterInput): Promise<Meter> {
  if (input.kind === 'known') {
    const meter = await Meter.findOne({ where: { id: input.id, siteId: site.id } });
    if (!meter) throw invalid('Choose the meter.', { id: [`There is no such meter at ${site.name}.`] });
    return meter;
  }
  const { label, serviceVoltageKv } = input;
  const known = await Meter.findOne({ where: { siteId: site.id, label } });
  if (known) throw invalid('Choose the meter.', { label: [`${site.name} has a meter ${label} already; choose it.`] });
  return Meter.create({ label, serviceVoltageKv, siteId: site.id });
}

/**
 * Takes a further meter off an engagement. It stays at its site with what is kept of it.
 *
 * @throws {ServiceError} 404; 409 for the first, where a motor stands behind it, or where a kept file of the engagement brought its readings
 */
export async function removeMeter(actor: Actor, code: string, meterId: number): Promise<MetersView> {
  const { engagement, meters } = await openForChange(actor, code);
  const [first] = meters;
  if (first?.id === meterId)
    throw conflict(
      `${first.label} is the meter the engagement is named by; it cannot be taken off. Take off the others.`,
    );
  const meter = meters.find(({ id }) => id === meterId);
  if (!meter) throw notFound();
  const where = { engagementId: engagement.id, meterId };
  await inTx(async () => {
    const motor = await Motor.findOne({ where });
    if (motor)
      throw conflict(`${motor.name} stands behind ${meter.label}. Put it behind another meter at the station Motors.`);
    const file = await Intake.findOne({ where: { ...where, kind: 'intervals', state: ['read', 'kept'] } });
    if (file)
      throw conflict(
        `The file ${file.fileName} belongs to ${meter.label}. ${file.state === 'kept' ? 'Undo it' : 'Give it up'} first.`,
        { intakeId: file.id },
      );
    await (await EngagementMeter.findOne({ where }))?.destroy();
  });
  return metersOf(await openEngagement(actor, code));
}
