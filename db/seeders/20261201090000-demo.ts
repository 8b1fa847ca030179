import { randomUUID } from 'node:crypto';
import { readFile } from 'node:fs/promises';
import path from 'node:path';
import { rightsInput } from '../../src/schemas/client';
import { engagementInput } from '../../src/schemas/engagement';
import { hourInput, type HourStation } from '../../src/schemas/hour';
import { searchFound } from '../../src/schemas/job';
import { planInput } from '../../src/schemas/plan-input';
import { planDefaults } from '../../src/schemas/plan-money';
import { demoAccounts } from '../../src/server/demo-accounts';
import { actAs } from '../../src/server/db/context';
import { getEnv } from '../../src/server/env';
import type { Actor } from '../../src/server/policies/actor';
import { joinBills } from '../../src/server/services/bill-joins';
import { addBill } from '../../src/server/services/bills';
import { createEngagement } from '../../src/server/services/create-engagement';
import {
  editionReaders,
  listEditions,
  mailEdition,
  makeEdition,
  openEdition,
} from '../../src/server/services/editions';
import { openEngagement, type OpenEngagement } from '../../src/server/services/engagements';
import { foundPractice } from '../../src/server/services/first-run';
import { logHours } from '../../src/server/services/hours';
import { createMotor } from '../../src/server/services/motors';
import { changePerson, openPerson } from '../../src/server/services/people';
import { choosePlan, createPlan, openPlan } from '../../src/server/services/plans';
import { setRate } from '../../src/server/services/rates';
import { createSchedule, keepRevision } from '../../src/server/services/schedule-revisions';
import { startSearch } from '../../src/server/services/search';
import { changeSupply } from '../../src/server/services/supplies';
import { chooseSchedule } from '../../src/server/services/tariff';
import { sendUtilityLetter, utilityLetterDraft } from '../../src/server/services/utility-letters';
import { attachJuneBill } from './demo/bill-pages';
import { addPersonWithPassword, bringIn, daysAgo, ended } from './demo/helpers';
import { harrowBills, harrowInvoicesOfMay, harrowSchedule } from './demo/harrow';
import { kestrelBillsFile, kestrelMeterFile } from './demo/kestrel-year';
import { kestrelBoth, kestrelCapacitors, kestrelSupply } from './demo/plans';
import { askKestrel } from './demo/requests';
import { earlierAdjustedKw, kestrel, kestrelMotors } from './demo/scenario';

const [ilse, tom, sana, mira, jon] = demoAccounts.people;
const readerRights = rightsInput.parse({ view: true, record: true, decide: true, pay: true });

interface Staff {
  ilse: Actor;
  noor: Actor;
  tom: Actor;
  sana: Actor;
}

/** The practice: two partners, so that one checks the other's licence, and two consultants. */
async function foundCalderVane(): Promise<Staff> {
  const partner = await foundPractice({
    practice: {
      name: 'Calder & Vane, energy engineers',
      legalName: 'Calder & Vane Energy Engineers LLP',
      phone: '555 0142',
      currency: 'USD',
    },
    partner: { name: ilse.name, email: ilse.email, password: demoAccounts.password },
  });
  const noor = await addPersonWithPassword(partner, {
    role: 'partner',
    name: 'Noor Calder',
    email: 'noor@calder-vane.example',
  });
  const staff = {
    ilse: partner,
    noor,
    tom: await addPersonWithPassword(partner, { role: 'consultant', name: tom.name, email: tom.email }),
    sana: await addPersonWithPassword(partner, { role: 'consultant', name: sana.name, email: sana.email }),
  };
  const holder = await openPerson(noor, partner.id);
  const licence = { jurisdiction: 'US-IL', number: 'PE 48213', expires: '2027-11-30' };
  await changePerson(noor, holder, { change: 'licence', licence, version: holder.version });
  for (const [person, perHour] of [[staff.ilse, 210] as const, [staff.tom, 145] as const, [staff.sana, 145] as const]) {
    await setRate(partner, { userId: person.id, engagementId: null, perHour, from: '2025-01-01' });
  }
  return staff;
}

async function openKestrel({ ilse: partner, tom: consultant }: Staff): Promise<OpenEngagement> {
  const code = await createEngagement(
    consultant,
    engagementInput.parse({
      requestId: randomUUID(),
      code: kestrel.code,
      title: 'Power-bill audit of Works 2',
      client: { kind: 'new', name: 'Kestrel Gap Lime & Stone', city: 'Kestrel Gap', currency: 'USD' },
      site: { kind: 'new', name: 'Works 2', place: 'Kestrel Gap', timeZone: kestrel.timeZone, jurisdiction: 'US-IL' },
      meter: { kind: 'new', label: 'OV 5510-274', serviceVoltageKv: 12.47 },
      yearFrom: kestrel.yearFrom,
      budgetHours: 60,
      memberIds: [consultant.id, partner.id],
    }),
  );
  const opened = await openEngagement(consultant, code);
  await addPersonWithPassword(partner, {
    role: 'client',
    name: mira.name,
    email: mira.email,
    clientId: opened.client.id,
    rights: readerRights,
  });
  return opened;
}

/** Files, tariff and motors of the first client, brought in as a consultant does. */
async function auditKestrel(consultant: Actor, opened: OpenEngagement): Promise<void> {
  const scheduleText = await readFile(path.join(getEnv().TARIFF_DIR, `${kestrel.scheduleId}.yaml`), 'utf8');
  const meter = kestrelMeterFile();
  await bringIn(consultant, opened, { kind: 'intervals', ...meter });
  await bringIn(consultant, opened, { kind: 'bills', ...(await kestrelBillsFile(scheduleText, meter)) });
  await chooseSchedule(consultant, opened.engagement.code, {
    scheduleId: kestrel.scheduleId,
    contract: kestrel.contract,
    history: { adjustedKw: earlierAdjustedKw },
    version: null,
    takeNewText: false,
  });
  for (const motor of kestrelMotors) await createMotor(opened, motor);
  await attachJuneBill(consultant, opened);
}

/** Puts the greatest finding to the utility; the other waits for somebody. */
async function writeToUtility(consultant: Actor, opened: OpenEngagement): Promise<void> {
  const { content } = await utilityLetterDraft(consultant, opened.engagement.code);
  const [greatest] = [...content.claims].sort((a, b) => b.amountMinor - a.amountMinor);
  if (!greatest) throw new Error('The demo scenario has no finding to put to the utility');
  await sendUtilityLetter(consultant, opened, {
    requestId: randomUUID(),
    findings: [{ id: greatest.findingId, version: greatest.version }],
    way: 'mail',
    name: 'Ostrander Valley Light & Power, Key accounts',
    address: 'key-accounts@ostrander-valley.example',
    postal: '200 Dam Road\nOstrander Valley, IL',
    account: '88-1042',
    opening: content.opening,
    closing: content.closing,
    replyBy: content.replyBy,
  });
}

/** Searches the best fields, makes the plan of them, sets capacitors beside it, and reports it to the client. */
async function proposeToKestrel(consultant: Actor, opened: OpenEngagement): Promise<void> {
  await changeSupply(opened, { version: 0, supply: kestrelSupply });
  const search = await ended(consultant, await startSearch(consultant, opened, { stepA: 2 }));
  const fields = searchFound(search)?.fields ?? [];
  const plan = await createPlan(
    opened,
    planInput.parse({
      name: 'Plan A',
      fields: fields.map(({ motorId, fieldA }) => ({ motorId, fieldA })),
      workCost: 61_500,
      yearlyUpkeep: 1_800,
      economics: {
        ...planDefaults,
        escalationPercent: 2,
        ranges: {
          escalationPercent: { low: -2, high: 6 },
          runsPercent: { low: 60, high: 120 },
          capitalCost: { low: 40_000, high: 120_000 },
          discountPercent: { low: 0, high: 15 },
        },
      },
      searchJobId: search.id,
    }),
  );
  await createPlan(opened, kestrelCapacitors);
  await createPlan(opened, kestrelBoth(fields));
  const found = await openPlan(consultant, plan.id);
  await choosePlan(found, { version: found.plan.version, chosen: true });
  await ended(consultant, await makeEdition(consultant, opened, plan.id));
  const [edition] = await listEditions(opened);
  if (!edition) throw new Error('The edition of the demo scenario was not made');
  const readers = await editionReaders(opened);
  await mailEdition(consultant, await openEdition(consultant, edition.id), {
    userIds: readers.map(({ id }) => id),
    greeting: '',
  });
}

/** The second client: small, with bills only, and nothing shown to it yet. */
async function openHarrow({ ilse: partner, sana: consultant }: Staff): Promise<OpenEngagement> {
  const code = await createEngagement(
    consultant,
    engagementInput.parse({
      requestId: randomUUID(),
      code: 'HS-01',
      title: 'First look at the bills',
      client: { kind: 'new', name: 'Harrow Sound Cold Store', city: 'Harrow Sound', currency: 'USD' },
      site: { kind: 'new', name: 'Pier 4', place: 'Harrow Sound', timeZone: 'America/Chicago', jurisdiction: 'US-WI' },
      meter: { kind: 'new', label: 'OV 2207-031', serviceVoltageKv: 12.47 },
      yearFrom: kestrel.yearFrom,
      budgetHours: 20,
      memberIds: [consultant.id],
    }),
  );
  const opened = await openEngagement(consultant, code);
  await addPersonWithPassword(partner, {
    role: 'client',
    name: jon.name,
    email: jon.email,
    clientId: opened.client.id,
    rights: readerRights,
  });
  await bringIn(consultant, opened, { kind: 'bills', ...harrowBills() });
  const invoices = [];
  for (const invoice of harrowInvoicesOfMay) invoices.push(await addBill(consultant, code, invoice));
  const note = 'The store changed hands on 20 May; each owner got an invoice.';
  await joinBills(consultant, code, { bills: invoices, note });
  return opened;
}

/** The second client's sheet, written down in the application: begun blank, then the sheet put in. */
async function writeHarrowSchedule(consultant: Actor): Promise<void> {
  const id = await createSchedule(consultant, {
    slug: 'ostrander-gs2',
    title: 'GS-2, general service with demand',
    from: { kind: 'blank' },
  });
  await keepRevision(consultant, id, { text: harrowSchedule, note: 'Sheet 9 of September 2025', baseNumber: 1 });
}

type Entry = [days: number, time: string, station: HourStation, note: string];

const tomsHours: Entry[] = [
  [13, '2.5', 'bills', 'Bills of twelve months read in and checked against the meter'],
  [12, '1:45', 'intervals', 'Meter file matched; the week of the failed meter marked'],
  [11, '3:15', 'tariff', 'Twelve bills priced; two differences traced to their cause'],
  [8, '4:00', 'motors', 'Visit to Works 2: plates of M-1 and M-2 photographed, fields read'],
  [8, '2:30', 'travel', 'Drive to Kestrel Gap and back'],
  [7, '3:30', 'plans', 'Search of field currents; quotations for two regulators worked in'],
  [5, '2:00', 'report', 'Edition 1 made and read over'],
];
const ilsesHours: Entry[] = [[6, '1:15', 'plans', 'Plan A checked: limits, pull-out, losses']];
const sanasHours: Entry[] = [[4, '1.5', 'bills', 'First look at the bills of Pier 4']];

async function log(actor: Actor, opened: OpenEngagement, entries: Entry[]): Promise<void> {
  for (const [days, time, station, note] of entries) {
    await logHours(actor, opened, hourInput.parse({ day: daysAgo(days), time, station, note, billable: true }));
  }
}

/** The demo scenario: an invented practice, one invented client in full, a second one beside it. */
export async function up(): Promise<void> {
  const staff = await foundCalderVane();
  const inTheNameOf = <Result>(person: Actor, work: () => Promise<Result>) =>
    actAs({ actorId: person.id, ip: null }, work);
  const works = await inTheNameOf(staff.tom, () => openKestrel(staff));
  await inTheNameOf(staff.tom, () => auditKestrel(staff.tom, works));
  await inTheNameOf(staff.tom, () => writeToUtility(staff.tom, works));
  await inTheNameOf(staff.tom, () => proposeToKestrel(staff.tom, works));
  await inTheNameOf(staff.tom, () => askKestrel(staff.tom, works, mira.email));
  const pier = await inTheNameOf(staff.sana, () => openHarrow(staff));
  await inTheNameOf(staff.sana, () => writeHarrowSchedule(staff.sana));
  await inTheNameOf(staff.tom, () => log(staff.tom, works, tomsHours));
  await inTheNameOf(staff.ilse, () => log(staff.ilse, works, ilsesHours));
  await inTheNameOf(staff.sana, () => log(staff.sana, pier, sanasHours));
}
