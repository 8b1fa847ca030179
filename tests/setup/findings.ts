import type { AddressInfo } from 'node:net';
import { SMTPServer } from 'smtp-server';
import { inTx } from '@/server/db/tx';
import { configureEnv } from '@/server/env';
import { Bill } from '@/server/models/Bill';
import { BillLine } from '@/server/models/BillLine';
import type { Engagement } from '@/server/models/Engagement';
import { TariffChoice } from '@/server/models/TariffChoice';
import type { Actor } from '@/server/policies/actor';
import { openEngagement } from '@/server/services/engagements';
import { findingsSummary } from '@/server/services/finding-records';
import { buildActor, buildEngagement } from './build';
import { keepBills, keepLoad } from './tariff';
import { summerBasis, timeOfUseSchedule, type Falsified } from './time-of-use';

export interface FindingsScene {
  actor: Actor;
  engagement: Engagement;
}

/** An engagement with June and July 2026 as falsified, their readings and the schedule. */
export async function buildFindings(falsified: Falsified, given: { actor?: Actor } = {}): Promise<FindingsScene> {
  const actor = given.actor ?? (await buildActor());
  const engagement = await buildEngagement({ memberIds: [actor.id] });
  const { bills, load } = summerBasis(falsified);
  await keepBills(
    engagement,
    bills.map(({ from, to, lines, totalMinor, quantities }) => ({
      from,
      to,
      totalMinor,
      quantities,
      lines: lines.map(({ label, amountMinor }) => [label, amountMinor]),
    })),
  );
  if (load) await keepLoad(engagement, load);
  await inTx(() =>
    TariffChoice.create({
      engagementId: engagement.id,
      scheduleId: 'valley-tou',
      scheduleText: timeOfUseSchedule,
      sha256: '0',
      contract: {},
      history: { adjKw: [100] },
      lineMatches: {},
    }),
  );
  return { actor, engagement };
}

/** The findings of a scene as people see them now. */
export async function findingsOf({ actor, engagement }: FindingsScene) {
  return (await findingsSummary(await openEngagement(actor, engagement.code))).findings;
}

/** Corrects a line of the bill that begins on a day, and its total with it. */
export async function reprint({ engagement }: FindingsScene, from: string, label: string, amountMinor: number) {
  await inTx(async () => {
    const bill = await Bill.findOne({ where: { engagementId: engagement.id, periodFrom: from }, rejectOnEmpty: true });
    const line = await BillLine.findOne({ where: { billId: bill.id, label }, rejectOnEmpty: true });
    await bill.update({ totalMinor: (bill.totalMinor ?? 0) + amountMinor - line.amountMinor });
    await line.update({ amountMinor });
  });
}

/** A mail server of the test: what it received, and whether it refuses. */
export interface Catcher {
  received: Buffer[];
  refuses: boolean;
  close(): Promise<void>;
}

/** Starts a mail server on a free port and has the application send there. */
export async function startCatcher(): Promise<Catcher> {
  const catcher: Catcher = { received: [], refuses: false, close: () => Promise.resolve() };
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    onRcptTo: (_address, _session, done) =>
      catcher.refuses ? done(Object.assign(new Error('no such person'), { responseCode: 550 })) : done(),
    onData(stream, _session, done) {
      const chunks: Buffer[] = [];
      stream.on('data', (chunk: Buffer) => chunks.push(chunk));
      stream.on('end', () => {
        catcher.received.push(Buffer.concat(chunks));
        done();
      });
    },
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', () => resolve()));
  process.env.SMTP_PORT = String((server.server.address() as AddressInfo).port);
  configureEnv({});
  catcher.close = () => new Promise((resolve) => server.close(() => resolve()));
  return catcher;
}
