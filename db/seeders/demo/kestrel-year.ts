import type { LoadSeries } from '../../../src/core/load';
import { operatingPoint } from '../../../src/core/machine';
import { priceBills, readSchedule, type PricedBill, type PriceOptions } from '../../../src/core/tariff';
import { readIntervals } from '../../../src/core/intake';
import { machineOrThrow } from '../../../src/server/services/nameplates';
import type { MotorInput } from '../../../src/schemas/motor';
import { billsWorkbook, printedBill, type PrintedBill } from './bills-file';
import { plantMoments } from './clock';
import { meterFile } from './meter-file';
import { plantPowers, type MotorPower } from './plant';
import { earlierAdjustedKw, kestrel, kestrelMotors, releasedSummerKw } from './scenario';

const meterFileName = 'ov5510274-2026.csv';

/** What a motor draws while it runs, at today's field and its usual load. */
function runningPower({ plate, calendar, fieldTodayA }: MotorInput): MotorPower {
  const machine = machineOrThrow(plate);
  const shaftKw = (machine.ratedOutputKw * (calendar.rules[0]?.load ?? 0)) / 100;
  const { inputKw, kvar } = operatingPoint(machine, { shaftKw, fieldCurrentA: fieldTodayA });
  return { kw: inputKw, kvar };
}

/** The interval file the utility sends for the year. */
export function kestrelMeterFile(): { fileName: string; bytes: Uint8Array } {
  const moments = [...plantMoments(kestrel.yearFrom, kestrel.yearTo, kestrel.timeZone)];
  const powers = plantPowers(moments, [runningPower(kestrelMotors[0]), runningPower(kestrelMotors[1])]);
  return { fileName: meterFileName, bytes: new TextEncoder().encode(meterFile(moments, powers)) };
}

const preamble = ['Ostrander Valley Light & Power', 'Statement of account 88-1042, Kestrel Gap Lime & Stone, Works 2'];

const periods = kestrel.readings.slice(1).map((to, index) => ({ from: kestrel.readings[index] as string, to }));

function price(scheduleText: string, load: LoadSeries, adjustedKw: number[]): PricedBill[] {
  const options: PriceOptions = { periods, contract: kestrel.contract, history: { adjustedKw } };
  return priceBills(readSchedule(scheduleText), load, options);
}

/** Bills of the year with two errors of the utility in them: a ratchet that was not released, and a season mistaken. */
function billsWithErrors(scheduleText: string, load: LoadSeries): PrintedBill[] {
  const right = price(scheduleText, load, earlierAdjustedKw);
  const stillCounted = earlierAdjustedKw.map((value, index) => (index === 20 ? releasedSummerKw : value));
  const ratchet = price(scheduleText, load, stillCounted);
  const summerForWinter = scheduleText.replace('winter: 13.05', 'winter: 17.70');
  const season = price(summerForWinter, load, earlierAdjustedKw);
  const wrongBills = new Map([
    [2, ratchet],
    [11, season],
  ]);
  return right.map((bill, index) => printedBill(wrongBills.get(index)?.[index] ?? bill, 771_204 + 8_617 * index));
}

/** The workbook of the year's bills, priced on what the meter file says. */
export async function kestrelBillsFile(
  scheduleText: string,
  meter: { fileName: string; bytes: Uint8Array },
): Promise<{ fileName: string; bytes: Uint8Array }> {
  const { load } = await readIntervals(meter.bytes, { fileName: meter.fileName, timeZone: kestrel.timeZone });
  return { fileName: 'kg2-ov-bills.xlsx', bytes: billsWorkbook(billsWithErrors(scheduleText, load), preamble) };
}
