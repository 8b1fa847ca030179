import { dayNumber } from '../../core/load';
import {
  isWanted,
  type ClientFileView,
  type ClientItemView,
  type ClientRequestView,
  type ReminderView,
  type RequestPersonView,
  type RequestSummary,
  type StaffFileView,
  type StaffItemView,
  type StaffRequestView,
} from '../../schemas/request';
import type { DataRequest } from '../models/DataRequest';
import type { RequestFile } from '../models/RequestFile';
import type { RequestItem } from '../models/RequestItem';
import type { RequestPerson } from '../models/RequestPerson';
import type { RequestReminder } from '../models/RequestReminder';

/** Time after which a mail that is still being sent was cut off: the mail server's own deadlines are shorter. [ms] */
const longestSendingMs = 2 * 60_000;

/** A request's rows, and the names of whom and what they point to. */
export interface RequestRows {
  code: string;
  /** Today on the practice's calendar, and the day it was sent. */
  today: string;
  sentOn: string;
  request: DataRequest;
  items: RequestItem[];
  /** Removed ones left out. */
  files: RequestFile[];
  people: RequestPerson[];
  users: Map<number, { name: string; email: string }>;
  motors: { id: number; name: string }[];
}

const nameIn = ({ users }: RequestRows, id: number | null) => users.get(id ?? 0)?.name ?? 'somebody';

/** Whether a mail was begun and never heard of: the server stopped while it was being sent. */
export const isMailUncertain = ({ state, updatedAt }: RequestPerson, nowMs = Date.now()) =>
  state === 'sending' && nowMs - updatedAt.getTime() > longestSendingMs;

function frameOf({ code, request, today, sentOn }: RequestRows) {
  const { number, state, dueOn, note } = request;
  return { code, number, state, sentOn, dueOn, daysLeft: dayNumber(dueOn) - dayNumber(today), note };
}

const periodOf = ({ periodFrom: from, periodTo: to }: RequestItem) => (from && to ? { from, to } : null);

function itemFrame(rows: RequestRows, item: RequestItem): Omit<ClientItemView, 'files'> {
  const { position, version, kind, words, state, reason, answer, motorId } = item;
  const motor = rows.motors.find(({ id }) => id === motorId)?.name ?? null;
  return { position, version, kind, words, period: periodOf(item), motor, state, reason, answer };
}

const filesOf = ({ files }: RequestRows, item: RequestItem) => files.filter(({ itemId }) => itemId === item.id);

function clientFile(rows: RequestRows, file: RequestFile, reader: { id: number; mayAnswer: boolean }): ClientFileView {
  const { key, version, fileName, bytes, createdAt, uploadedById, state } = file;
  return {
    key,
    version,
    fileName,
    bytes,
    at: createdAt.toISOString(),
    by: nameIn(rows, uploadedById),
    isMine: uploadedById === reader.id,
    mayRemove: reader.mayAnswer && state === 'new',
  };
}

/** A request for the client's people: nothing of what the practice thinks of it. */
export function presentClientRequest(
  rows: RequestRows,
  reader: { id: number; mayAnswer: boolean },
  practice: { name: string; phone: string },
): ClientRequestView {
  const maker = rows.users.get(rows.request.madeById ?? 0);
  return {
    ...frameOf(rows),
    by: {
      name: maker?.name ?? practice.name,
      email: maker?.email ?? '',
      practice: practice.name,
      phone: practice.phone,
    },
    items: rows.items.map((item) => ({
      ...itemFrame(rows, item),
      files: filesOf(rows, item).map((file) => clientFile(rows, file, reader)),
    })),
    mayAnswer: reader.mayAnswer,
  };
}

function staffFile(rows: RequestRows, file: RequestFile): StaffFileView {
  const { key, version, fileName, bytes, mediaType, createdAt, uploadedById, state, intakeId, motorId } = file;
  return {
    key,
    version,
    fileName,
    bytes,
    mediaType,
    at: createdAt.toISOString(),
    by: nameIn(rows, uploadedById),
    state: state === 'removed' ? 'set-aside' : state,
    intakeId,
    motor: rows.motors.find(({ id }) => id === motorId)?.name ?? null,
  };
}

function staffItem(rows: RequestRows, item: RequestItem): StaffItemView {
  return {
    ...itemFrame(rows, item),
    motorId: item.motorId,
    answeredBy: item.answeredById === null ? null : nameIn(rows, item.answeredById),
    files: filesOf(rows, item).map((file) => staffFile(rows, file)),
  };
}

function presentPerson(rows: RequestRows, person: RequestPerson): RequestPersonView {
  const { userId, state, error, sentAt } = person;
  const user = rows.users.get(userId);
  return {
    userId,
    name: user?.name ?? '',
    email: user?.email ?? '',
    state,
    isUncertain: isMailUncertain(person),
    error,
    sentAt: sentAt?.toISOString() ?? null,
  };
}

const presentReminder = (rows: RequestRows, { day, userId, state }: RequestReminder): ReminderView => ({
  day,
  name: nameIn(rows, userId),
  state,
});

/** A request for the practice. */
export function presentStaffRequest(
  rows: RequestRows,
  mails: { reminders: RequestReminder[]; nextReminderOn: string | null },
): StaffRequestView {
  const { request } = rows;
  return {
    ...frameOf(rows),
    version: request.version,
    by: nameIn(rows, request.madeById),
    internalNote: request.internalNote,
    rule: request.reminders,
    people: rows.people.map((person) => presentPerson(rows, person)),
    reminders: mails.reminders.map((reminder) => presentReminder(rows, reminder)),
    nextReminderOn: mails.nextReminderOn,
    items: rows.items.map((item) => staffItem(rows, item)),
    motors: rows.motors,
  };
}

/** A request in a list. */
export function presentRequestSummary(rows: RequestRows): RequestSummary {
  const { items, files, people } = rows;
  const { note: _note, ...frame } = frameOf(rows);
  return {
    ...frame,
    people: people.map(({ userId }) => nameIn(rows, userId)),
    kinds: [...new Set(items.map(({ kind }) => kind))],
    wanted: [...new Set(items.filter(isWanted).map(({ kind }) => kind))],
    items: items.length,
    answered: items.filter((item) => !isWanted(item)).length,
    accepted: items.filter(({ state }) => state === 'accepted').length,
    newFiles: files.filter(({ state }) => state === 'new').length,
  };
}
