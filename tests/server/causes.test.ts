import { describe, expect, it } from 'vitest';
import { reconcileYear } from '@/server/services/reconcile';
import { byHand, summerBasis, type Falsified } from '../setup/time-of-use';

/** Findings of the two bills, falsified as told: kind, line, amount of the line and the best cause with its miss. */
const foundIn = (falsified: Falsified) =>
  reconcileYear(summerBasis(falsified)).findings.map(({ kind, lineId, lineAmountMinor, causes }) => ({
    kind,
    lineId,
    lineAmountMinor,
    best: causes[0]?.label,
    missMinor: causes[0]?.missMinor,
  }));

/** Tax of June at 5 % of service, demand and energy. */
const juneTax = ({ service = 400, demand = byHand.june.demand, energy = byHand.june.energy }) =>
  Math.round((service + demand + energy) * 5) / 100;

const demandOfJune = (demand: number): Falsified => ({ june: { demand, tax: juneTax({ demand }) } });
const energyOfJune = (energy: number): Falsified => ({ june: { energy, tax: juneTax({ energy }) } });

describe('bills as worked by hand', () => {
  it('agree with the schedule to the cent', () => {
    const year = reconcileYear(summerBasis({}));
    expect(year.findings).toEqual([]);
    expect(year.bills.map(({ differenceMinor }) => differenceMinor)).toEqual([0, 0]);
  });
});

describe('demand read in the wrong window', () => {
  it('is found where the peak of all hours was taken', () => {
    // 1,600 kW of Saturday night: 1,600 x 0.95 / 0.819 = 1,855.92 -> 1,856 kW x 10.00 = 18,560.00, 2,320.00 too much.
    expect(foundIn(demandOfJune(18_560))).toMatchObject([
      {
        kind: 'wrong-window',
        lineId: 'demand',
        lineAmountMinor: 232_000,
        best: 'Peak on peak read at all hours',
        missMinor: 0,
      },
    ]);
  });

  it('is found where the mean of 30 or 60 minutes was taken', () => {
    // 10:00 to 10:30: (1,400 + 1,000) / 2 = 1,200 kW: 1,200 x 0.95 / 0.819 = 1,391.94 -> 1,392 kW, 13,920.00.
    expect(foundIn(demandOfJune(13_920))[0]).toMatchObject({
      kind: 'wrong-window',
      lineAmountMinor: -232_000,
      best: 'demand as the mean of 30 minutes',
      missMinor: 0,
    });
    // 10:00 to 11:00: (1,400 + 3 x 1,000) / 4 = 1,100 kW: 1,275.95 -> 1,276 kW, 12,760.00.
    expect(foundIn(demandOfJune(12_760))[0]).toMatchObject({
      kind: 'wrong-window',
      best: 'demand as the mean of 60 minutes',
      missMinor: 0,
    });
  });
});

describe('a quantity rounded otherwise', () => {
  it('is found for a power factor in whole percent, cut to it, and not rounded at all', () => {
    // 0.82: 1,330 / 0.82 = 1,621.95 -> 1,622 kW, 16,220.00.
    expect(foundIn(demandOfJune(16_220))[0]).toMatchObject({
      kind: 'wrong-rounding',
      lineAmountMinor: -2_000,
      best: 'Power factor rounded to 0.01 (whole percent)',
      missMinor: 0,
    });
    // Cut to 0.81: 1,330 / 0.81 = 1,641.98 -> 1,642 kW, 16,420.00.
    expect(foundIn(demandOfJune(16_420))[0]).toMatchObject({
      kind: 'wrong-rounding',
      lineAmountMinor: 18_000,
      best: 'Power factor cut to 0.01 (whole percent)',
    });
    // 0.819232: 1,330 / 0.819232 = 1,623.47 -> 1,623 kW, 16,230.00.
    expect(foundIn(demandOfJune(16_230))[0]).toMatchObject({ kind: 'wrong-rounding', lineAmountMinor: -1_000 });
  });

  it('is carried on by the ratchet: where nothing else fits it is tried in every bill', () => {
    // June at 0.82: 1,622 kW. July: 0.80 x 1,622 = 1,297.6 -> 1,298 kW, 12,980.00; tax 5 % of 50,580 = 2,529.00. So it is
    // with June's 1,623 kW of a power factor not rounded (1,298.4 -> 1,298): both fit, and both are said.
    const year = reconcileYear(summerBasis({ ...demandOfJune(16_220), july: { demand: 12_980, tax: 2_529 } }));
    const [june, july] = year.findings;
    expect(june?.causes.filter(({ fits }) => fits).map(({ label }) => label)).toEqual([
      'Power factor rounded to 0.01 (whole percent)',
    ]);
    expect(july?.kind).toBe('wrong-rounding');
    const fitting = july?.causes.filter(({ fits }) => fits).map(({ label }) => label);
    expect(fitting).toContain('Power factor rounded to 0.01 (whole percent), in every bill');
    expect(fitting).toContain('Power factor not rounded, in every bill');
    expect(july?.sentence).toContain('causes fit as well');
  });
});

describe('another length of the period', () => {
  it('is found where a fixed amount was shared by days', () => {
    // 400.00 x 30 / 31 = 387.10; tax 5 % of 387.10 + 16,240 + 36,035 = 2,633.105 -> 2,633.11.
    expect(foundIn({ june: { service: 387.1, tax: 2_633.11 } })).toMatchObject([
      {
        kind: 'wrong-period',
        lineId: 'service',
        lineAmountMinor: -1_290,
        best: '30 days charged against a month of 31 days',
        missMinor: 0,
      },
    ]);
    // 400.00 x 31 / 30 = 413.33; tax 5 % of 52,688.33 = 2,634.42.
    expect(foundIn({ june: { service: 413.33, tax: 2_634.42 } })[0]).toMatchObject({
      kind: 'wrong-period',
      best: 'charged for 31 days instead of 30',
      missMinor: 0,
    });
  });

  it('is found where the meter was read a day late', () => {
    // The first of July belongs to it too: 24 h x 1,000 kW = 24,000 kWh x 0.05 = 1,200.00 more.
    expect(foundIn(energyOfJune(37_235))).toMatchObject([
      {
        kind: 'wrong-period',
        lineId: 'energy',
        lineAmountMinor: 120_000,
        best: 'read a day late: 1 Jun 2026 to 1 Jul 2026',
        missMinor: 0,
      },
    ]);
  });
});

describe('a tax taken of other lines', () => {
  it('is found where the rider was taxed too', () => {
    // 5 % of 52,675.00 + 1,441.40 = 2,705.82, 72.07 too much.
    expect(foundIn({ june: { tax: 2_705.82 } })).toMatchObject([
      { kind: 'wrong-base', lineId: 'tax', lineAmountMinor: 7_207, best: 'taken of everything above it', missMinor: 0 },
    ]);
  });

  it('is found where one line was left out', () => {
    // 5 % of 16,240.00 + 36,035.00 = 2,613.75, 20.00 too little.
    expect(foundIn({ june: { tax: 2_613.75 } })[0]).toMatchObject({
      kind: 'wrong-base',
      lineAmountMinor: -2_000,
      best: 'taken without Service',
      missMinor: 0,
    });
  });
});

describe('the wrong multiplier of the meter', () => {
  it('is found in the energy: twice, and one of three phases lost', () => {
    // 2 x 36,035.00 = 72,070.00; 2 / 3 x 36,035.00 = 24,023.33.
    expect(foundIn(energyOfJune(72_070))[0]).toMatchObject({
      kind: 'wrong-multiplier',
      best: "the meter's values times 2",
      missMinor: 0,
    });
    expect(foundIn(energyOfJune(24_023.33))[0]).toMatchObject({
      kind: 'wrong-multiplier',
      best: "the meter's values times 2 / 3",
      missMinor: 0,
    });
  });

  it('is found in the demand', () => {
    // 1.2 x 1,400 = 1,680 kW: 1,596 / 0.819 = 1,948.72 -> 1,949 kW, 19,490.00; the pf is the same.
    expect(foundIn(demandOfJune(19_490))[0]).toMatchObject({
      kind: 'wrong-multiplier',
      best: "the meter's values times 1.2",
      missMinor: 0,
    });
  });
});

describe('energy printed and metered', () => {
  const energyOf = (falsified: Falsified) => reconcileYear(summerBasis(falsified)).findings.map(({ energy }) => energy);

  it('is a finding of its own where the money agrees, with its worth, and adds nothing to the difference', () => {
    // 740,000 printed, 720,700 metered: 19,300 kWh x 0.05 = 965.00.
    const falsified = { quantities: { kwh: 740_000 } };
    expect(foundIn(falsified)).toMatchObject([{ kind: 'energy-differs', lineId: null, lineAmountMinor: 0 }]);
    expect(energyOf(falsified)).toEqual([{ printedKwh: 740_000, meteredKwh: 720_700, worthMinor: 96_500 }]);
    expect(reconcileYear(summerBasis(falsified)).totals.differenceMinor).toBe(0);
  });

  it('is none within the reading of an hour, 0.2 %', () => {
    // 0.2 % of 720,700 is 1,441.4 kWh.
    expect(foundIn({ quantities: { kwh: 720_700 + 1_441 } })).toEqual([]);
    expect(foundIn({ quantities: { kwh: 720_700 - 1_442 } })).toMatchObject([{ kind: 'energy-differs' }]);
  });

  it('is told once: where the energy line was billed on the printed figure, that line tells it', () => {
    // 725,000 x 0.05 = 36,250.00, 215.00 too much.
    expect(foundIn({ ...energyOfJune(36_250), quantities: { kwh: 725_000 } })).toMatchObject([
      {
        kind: 'wrong-quantity',
        lineId: 'energy',
        lineAmountMinor: 21_500,
        best: 'Energy as the bill prints it, 725,000 kWh',
        missMinor: 0,
      },
    ]);
  });
});

describe('what no supposition gives', () => {
  it('stays unexplained, with how far the nearest missed', () => {
    const [finding] = reconcileYear(summerBasis(demandOfJune(16_987.65))).findings;
    expect(finding?.kind).toBe('unexplained');
    expect(finding?.causes.every(({ fits, missMinor }) => !fits && missMinor !== 0)).toBe(true);
  });
});

describe('the tolerance of a line', () => {
  it('is the one chosen: seven cents are a finding at five, none at ten', () => {
    const falsified = { june: { rider: 1_441.47 } };
    expect(foundIn({ ...falsified, toleranceMinor: 5 })).toHaveLength(1);
    expect(foundIn({ ...falsified, toleranceMinor: 10 })).toEqual([]);
  });
});
