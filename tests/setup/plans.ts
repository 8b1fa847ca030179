import type { LoadSeries } from '@/core/load';
import { inTx } from '@/server/db/tx';
import { TariffChoice } from '@/server/models/TariffChoice';
import type { Actor } from '@/server/policies/actor';
import { openEngagement, type OpenEngagement } from '@/server/services/engagements';
import { createMotor } from '@/server/services/motors';
import { buildActor, buildEngagement } from './build';
import { compressorMotor, millMotor, motorOf } from './motors';
import { keepBills, keepLoad, quarrySchedule, steadyLoad, twelveMonths } from './tariff';

/** Chooses a schedule for an engagement, as its text stands. */
export const chooseSchedule = (engagementId: number, scheduleText = quarrySchedule) =>
  inTx(() =>
    TariffChoice.create({
      engagementId,
      scheduleId: 'quarry-lp',
      scheduleText,
      sha256: '0',
      contract: {},
      history: null,
      lineMatches: {},
    }),
  );

export interface PlansStation {
  actor: Actor;
  opened: OpenEngagement;
  millId: number;
  compressorId: number;
}

/**
 * An engagement with all a plan needs: a year of steady readings at power factor 0.74, twelve bills, a schedule that charges
 * for poor power factor, two motors that run under-excited.
 *
 * @param spoil  changes the readings before they are kept: a gap, for instance
 */
export async function buildPlansStation(spoil: (load: LoadSeries) => void = () => undefined): Promise<PlansStation> {
  const actor = await buildActor();
  const engagement = await buildEngagement({ memberIds: [actor.id] });
  const load = steadyLoad('2025-11-01', '2026-11-01', () => 3000, 0.9);
  spoil(load);
  await keepLoad(engagement, load);
  const months = twelveMonths(2025, 11);
  await keepBills(
    engagement,
    months.map((month) => ({ ...month, lines: [], totalMinor: null })),
  );
  await chooseSchedule(engagement.id);
  const opened = await openEngagement(actor, engagement.code);
  const mill = await createMotor(opened, motorOf(millMotor));
  const compressor = await createMotor(opened, motorOf(compressorMotor));
  return { actor, opened, millId: mill.id, compressorId: compressor.id };
}
