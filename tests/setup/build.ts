import type { CreationAttributes } from 'sequelize';
import { inTx } from '@/server/db/tx';
import { Client } from '@/server/models/Client';
import { Engagement } from '@/server/models/Engagement';
import { Intake } from '@/server/models/Intake';
import { Membership } from '@/server/models/Membership';
import { Meter } from '@/server/models/Meter';
import { Site } from '@/server/models/Site';
import { User } from '@/server/models/User';
import { toActor } from '@/server/services/sign-in';

let serial = 0;
const next = () => ++serial;

const noRights = { view: false, record: false, decide: false, pay: false };

/** A client of the practice. */
export const buildClient = (given: Partial<CreationAttributes<Client>> = {}) =>
  inTx(() => Client.create({ name: `Client ${next()}`, city: null, contact: null, currency: 'USD', ...given }));

/** A person; one of a client gets that client made, and the right to view. */
export async function buildUser(given: Partial<CreationAttributes<User>> = {}): Promise<User> {
  const role = given.role ?? 'consultant';
  const clientId = role === 'client' ? (given.clientId ?? (await buildClient()).id) : null;
  return inTx(() =>
    User.create({
      email: `person${next()}@practice.example`,
      name: `Person ${serial}`,
      passwordHash: null,
      rights: role === 'client' ? { ...noRights, view: true } : noRights,
      licenceJurisdiction: null,
      licenceNumber: null,
      licenceExpires: null,
      licenceCheckedById: null,
      disabledAt: null,
      ...given,
      role,
      clientId,
    }),
  );
}

/** A person as policies see them. */
export const buildActor = async (given: Partial<CreationAttributes<User>> = {}) => toActor(await buildUser(given));

/** An engagement with client, site, meter and the members given. */
export async function buildEngagement(
  given: Partial<CreationAttributes<Engagement>> & { memberIds?: number[]; timeZone?: string } = {},
): Promise<Engagement> {
  const { memberIds = [], timeZone = 'America/Chicago', ...values } = given;
  const clientId = values.clientId ?? (await buildClient()).id;
  return inTx(async () => {
    const site = await Site.create({ clientId, name: 'Works', place: null, timeZone, jurisdiction: 'IL' });
    const meter = await Meter.create({ siteId: site.id, label: `OV ${next()}`, serviceVoltageKv: 12.47 });
    const engagement = await Engagement.create({
      code: `EN-${serial}`,
      title: 'Audit',
      siteId: site.id,
      meterId: meter.id,
      yearFrom: '2025-11-01',
      yearTo: '2026-11-01',
      currency: 'USD',
      budgetHours: null,
      closedAt: null,
      ...values,
      clientId,
    });
    for (const userId of memberIds) await Membership.create({ engagementId: engagement.id, userId });
    return engagement;
  });
}

/** A file of an engagement and its own meter, kept unless told otherwise. */
export const buildIntake = (given: Partial<CreationAttributes<Intake>> & { engagementId: number }) =>
  inTx(async () => {
    const { meterId } = await Engagement.findByPk(given.engagementId, { rejectOnEmpty: true });
    return Intake.create({
      meterId,
      kind: 'intervals',
      fileName: `${given.kind ?? 'intervals'}.csv`,
      bytes: 10,
      sha256: 'a'.repeat(64),
      state: 'kept',
      columnMap: null,
      preview: null,
      report: null,
      problems: null,
      broughtById: null,
      keptAt: null,
      undoneAt: null,
      ...given,
    });
  });
