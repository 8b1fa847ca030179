import { describe, expect, it } from 'vitest';
import type { ServiceError } from '@/server/errors';
import { motorInput } from '@/schemas/motor';
import { plateInput } from '@/schemas/plate';
import { Motor } from '@/server/models/Motor';
import { openEngagement } from '@/server/services/engagements';
import { changeMotor, createMotor, motorsOf, openMotor, removeMotor } from '@/server/services/motors';
import { buildActor, buildEngagement } from '../setup/build';
import { compressorMotor, millMotor, motorOf } from '../setup/motors';

async function station() {
  const actor = await buildActor();
  const engagement = await buildEngagement({ memberIds: [actor.id] });
  return { actor, engagement, opened: await openEngagement(actor, engagement.code) };
}

/** The error a piece of work ends with. */
async function refusal(work: Promise<unknown>): Promise<ServiceError> {
  return work.then(
    () => Promise.reject(new Error('this was not refused')),
    (error: ServiceError) => error,
  );
}

describe('who may open a motor', () => {
  it('is nobody outside the engagement: consultants who are no member and clients get 404', async () => {
    const { engagement, opened } = await station();
    const motor = await createMotor(opened, motorOf(millMotor));
    const stranger = await buildActor();
    const client = await buildActor({ role: 'client', clientId: engagement.clientId });
    for (const actor of [stranger, client]) {
      expect(await refusal(openMotor(actor, motor.id))).toMatchObject({ status: 404 });
    }
    expect(await refusal(openMotor(stranger, 99_999))).toMatchObject({ status: 404 });
  });
});

describe('a plate that contradicts itself', () => {
  it('is refused by the form where the efficiency is over 100 %', () => {
    const parsed = plateInput.safeParse({ ...(millMotor.plate as object), efficiencyPercent: 104 });
    expect(parsed.success).toBe(false);
    expect(parsed.error?.issues[0]).toMatchObject({ path: ['efficiencyPercent'] });
  });

  it('is refused where the rated current cannot give the rated output, with by how much', async () => {
    const { opened } = await station();
    // 4160 V x 200 A x sqrt 3 x 0.8 = 1,153 kW of input for 2,000 hp = 1,492 kW of output
    const error = await refusal(createMotor(opened, motorOf(millMotor, { currentA: 200, efficiencyPercent: null })));
    expect(error).toMatchObject({ status: 422 });
    expect(error.fields?.['plate.currentA']?.[0]).toMatch(/1152\.\d kW for 1492\.0 kW/);
  });

  it('is refused where current and efficiency disagree, at the entry that disagrees', async () => {
    const { opened } = await station();
    const error = await refusal(createMotor(opened, motorOf(millMotor, { currentA: 310 })));
    expect(error.fields?.['plate.currentA']?.[0]).toContain('310 A');
    expect(await Motor.count({ where: { engagementId: opened.engagement.id } })).toBe(0);
  });

  it('is refused where speed, frequency and poles disagree', async () => {
    const { opened } = await station();
    const error = await refusal(createMotor(opened, motorOf(millMotor, { speedRpm: 231 })));
    expect(error.fields?.['plate.speedRpm']?.[0]).toContain('231 rpm');
  });

  it('asks for what no typical value can stand in for', () => {
    const { speedRpm: _speed, fieldVoltageV: _volts, ...plate } = millMotor.plate as Record<string, unknown>;
    const paths = plateInput.safeParse(plate).error?.issues.map((issue) => issue.path.join('.'));
    expect(paths).toEqual(['fieldVoltageV', 'speedRpm']);
  });
});

describe('the field current of today', () => {
  it('is refused beyond the limit, with limit, margin and remedy', async () => {
    const { opened } = await station();
    const error = await refusal(createMotor(opened, motorOf(millMotor, {}, { fieldTodayA: 230 })));
    expect(error).toMatchObject({ status: 422 });
    expect(error.fields?.fieldTodayA?.[0]).toBe(
      '230 A is 26 A beyond the field limit of M-1, 204 A. ' +
        'Read the ammeter again. If it is right the motor runs too hot: lower the field now, or correct the limit.',
    );
  });

  it('is refused beyond an exciter limit below the rated field', async () => {
    const { opened } = await station();
    const input = motorOf(millMotor, { limits: { fieldCurrentA: 150 } }, { fieldTodayA: 160 });
    const error = await refusal(createMotor(opened, input));
    expect(error.fields?.fieldTodayA?.[0]).toContain('10 A beyond the field limit of M-1, 150 A');
  });

  it('is refused where it cannot hold the load, at both entries', async () => {
    const { opened } = await station();
    const error = await refusal(createMotor(opened, motorOf(millMotor, {}, { fieldTodayA: 30 })));
    expect(error).toMatchObject({ status: 422 });
    expect(error.fields?.fieldTodayA?.[0]).toContain('falls out of step above');
    expect(error.fields?.['calendar.rules.0.load']?.[0]).toContain('1,119 kW (75 % of rated)');
  });

  it('is read at the panel of a brushless machine', async () => {
    const { opened } = await station();
    const brushless = { exciterKind: 'brushless', exciterFieldA: 5.1 };
    const input = motorOf(millMotor, brushless, { fieldTodayA: 2.725, fieldReadAt: 'panel' });
    const motor = await createMotor(opened, input);
    // Through the origin where no-load amperes are not known: 204 A x 2.725 / 5.1 = 109 A
    expect(motor.fieldTodayA).toBeCloseTo(109, 6);
    expect(motor.panel?.todayA).toBe(2.725);
  });
});

describe('a stored motor', () => {
  it('keeps the plate as it was worded and marks what was assumed', async () => {
    const { opened } = await station();
    await createMotor(opened, motorOf(millMotor));
    const [motor] = await motorsOf(opened);
    expect(motor?.plate).toMatchObject({ output: 2000, outputUnit: 'hp', efficiencyPercent: 95.7 });
    expect(motor?.machine.ratedOutputKw).toBeCloseTo(1492, 6);
    expect(motor?.machine.poles).toBe(32);
    const assumed = motor?.assumed.map((one) => one.field) ?? [];
    expect(assumed).toContain('xqPu');
    expect(assumed).not.toContain('xdPu');
    const xq = motor?.assumed.find((one) => one.field === 'xqPu');
    expect(xq?.range?.[0]).toBeLessThan(xq?.value ?? 0);
    expect(xq?.kvarEffect?.every(Number.isFinite)).toBe(true);
  });

  it('absorbs at the field of today and may deliver within its limits', async () => {
    const { opened } = await station();
    const motor = await createMotor(opened, motorOf(millMotor));
    expect(motor.kvarToday).toBeLessThan(0);
    expect(motor.capability.kvarDelivered ?? 0).toBeGreaterThan(1000);
    expect(motor.capability.fieldCurrentA).toBeCloseTo(204, 6);
    expect(motor.capability.binding).toBe('field');
    expect(motor.usualLoadPercent).toBeCloseTo(75, 9);
  });

  it('runs the hours of its calendar', async () => {
    const { opened } = await station();
    const motor = await createMotor(opened, motorOf(millMotor));
    // 1 Nov 2025 to 31 Oct 2026: 365 days, 52 Sundays, and the shutdown of 28 days with its 4 Sundays: 365 - 52 - 24 days of 16 h
    expect(motor.hoursRunning).toBe((365 - 52 - 24) * 16);
  });

  it('runs over midnight, and a later rule wins', async () => {
    const { opened } = await station();
    const night = { days: ['Sun'], fromHour: 22, toHour: 6, load: 50, unit: 'percent' };
    const idle = { days: ['Mon'], fromHour: 5, toHour: 6, load: 0, unit: 'kW' };
    const calendar = { rules: [night, idle], shutdowns: [] };
    const motor = await createMotor(opened, motorOf(millMotor, {}, { calendar }));
    // 52 Sunday evenings of 2 h and 52 Monday mornings of 6 h lie in the year; the last hour of these stands still
    expect(motor.hoursRunning).toBe(52 * 2 + 52 * 5);
    expect(motor.usualLoadPercent).toBe(50);
  });

  it('shares its name with no other of the plant', async () => {
    const { opened } = await station();
    await createMotor(opened, motorOf(millMotor));
    const error = await refusal(createMotor(opened, motorOf(compressorMotor, {}, { name: 'M-1' })));
    expect(error).toMatchObject({ status: 422, fields: { name: [expect.stringContaining('M-1')] } });
  });
});

describe('changing and removing a motor', () => {
  it('tells a second person both versions, and takes theirs over it knowingly', async () => {
    const { actor, opened } = await station();
    const first = await createMotor(opened, motorOf(millMotor));
    const found = await openMotor(actor, first.id);
    await changeMotor(found, { ...motorOf(millMotor, {}, { fieldTodayA: 112 }), version: first.version });
    const mine = motorOf(millMotor, {}, { fieldTodayA: 115 });
    const late = { ...mine, version: first.version };
    const error = await refusal(changeMotor(await openMotor(actor, first.id), late));
    expect(error).toMatchObject({ status: 409, code: 'stale' });
    expect(error.details).toMatchObject({ mine: { fieldTodayA: 115 }, theirs: { fieldTodayA: 112, version: 1 } });
    const theirs = error.details?.theirs as { version: number };
    const saved = await changeMotor(await openMotor(actor, first.id), { ...mine, version: theirs.version });
    expect(saved).toMatchObject({ fieldTodayA: 115, version: 2 });
  });

  it('removes only the version that was seen', async () => {
    const { actor, opened } = await station();
    const motor = await createMotor(opened, motorOf(millMotor));
    expect(await refusal(removeMotor(await openMotor(actor, motor.id), { version: 7 }))).toMatchObject({ status: 409 });
    await removeMotor(await openMotor(actor, motor.id), { version: motor.version });
    expect(await motorsOf(opened)).toEqual([]);
  });

  it('refuses a calendar that is no calendar', () => {
    const calendar = { rules: [], shutdowns: [{ from: '2026-02-30', lastDay: '2026-03-01' }] };
    const paths = motorInput.safeParse({ ...millMotor, calendar }).error?.issues.map((issue) => issue.path.join('.'));
    expect(paths).toEqual(['calendar.rules', 'calendar.shutdowns.0.from']);
  });
});

describe('a brushless machine', () => {
  /** 5.1 A of exciter field at rated load, 2.1 A at no load; nobody read the field behind the rectifier. */
  const brushless = {
    exciterKind: 'brushless',
    exciterFieldA: 5.1,
    exciterNoLoadA: 2.1,
    fieldCurrentA: null,
    fieldVoltageV: null,
  };

  it('needs no amperes of its own field where the plate gives those of the exciter', async () => {
    const { opened } = await station();
    const input = motorOf(millMotor, brushless, { fieldTodayA: 3, fieldReadAt: 'panel' });
    const motor = await createMotor(opened, input);
    expect(motor.panel).toMatchObject({ todayA: 3, ratedA: 5.1 });
    expect(motor.panel?.limitA).toBeCloseTo(5.1, 9);
    expect(motor.assumed.map((one) => one.field)).toContain('ratedFieldCurrentA');
  });

  it('is asked for the exciter’s amperes, or its own', () => {
    const plate = { ...(millMotor.plate as object), exciterKind: 'brushless', fieldCurrentA: null };
    expect(plateInput.safeParse(plate).error?.issues[0]).toMatchObject({ path: ['exciterFieldA'] });
    const static_ = plateInput.safeParse({ ...plate, exciterKind: 'static' });
    expect(static_.error?.issues[0]).toMatchObject({ path: ['fieldCurrentA'] });
  });

  it('is limited and refused in amperes of the exciter’s field', async () => {
    const { opened } = await station();
    const limited = { ...brushless, limits: { exciterFieldA: 4.5 } };
    const error = await refusal(
      createMotor(opened, motorOf(millMotor, limited, { fieldTodayA: 4.8, fieldReadAt: 'panel' })),
    );
    expect(error.fields?.fieldTodayA?.[0]).toMatch(
      /^4\.80 A of exciter field is 0\.30 A beyond the field limit of M-1, 4\.50 A of exciter field\./,
    );
    const motor = await createMotor(opened, motorOf(millMotor, limited, { fieldTodayA: 3, fieldReadAt: 'panel' }));
    expect(motor.panel?.limitA).toBeCloseTo(4.5, 9);
    expect(motor.limits.fieldBy).toBe('exciter');
  });

  it('gives the reading back as it was typed where somebody saved in between', async () => {
    const { actor, opened } = await station();
    const input = motorOf(millMotor, brushless, { fieldTodayA: 3.15, fieldReadAt: 'panel' });
    const { id } = await createMotor(opened, input);
    const error = await refusal(changeMotor(await openMotor(actor, id), { ...input, version: 7 }));
    expect(error.details?.theirs).toMatchObject({ fieldTodayA: 3.15, fieldReadAt: 'panel' });
  });
});

describe('a plate as it is worded', () => {
  it('takes a field resistance measured cold in place of volts, with its temperature', async () => {
    const { opened } = await station();
    const cold = { fieldVoltageV: null, coldFieldResistanceOhm: 0.45, coldFieldAtC: 20, temperatureRiseC: 80 };
    const motor = await createMotor(opened, motorOf(millMotor, cold));
    // 0.45 x (234.5 + 40 + 80) / (234.5 + 20) = 0.62682 ohm
    expect(motor.machine.fieldResistanceOhm).toBeCloseTo(0.62682, 5);
    const alone = plateInput.safeParse({ ...(millMotor.plate as object), coldFieldResistanceOhm: 0.45 });
    expect(alone.error?.issues[0]).toMatchObject({ path: ['coldFieldAtC'] });
  });

  it('is refused where cold and hot resistance disagree, at the measured one', async () => {
    const { opened } = await station();
    const cold = { coldFieldResistanceOhm: 0.3, coldFieldAtC: 20, temperatureRiseC: 80 };
    const error = await refusal(createMotor(opened, motorOf(millMotor, cold)));
    // 118 V / 204 A = 0.5784 ohm; 0.3 becomes 0.4179: 38.4 % above
    expect(error.fields?.['plate.coldFieldResistanceOhm']?.[0]).toContain('38.4 %');
  });

  it('takes reactances in ohms where the connection is said', async () => {
    const { opened } = await station();
    const ohms = { xdPu: null, raPu: null, xdOhm: 29.2, raOhm: 0.27, connection: 'delta' };
    const motor = await createMotor(opened, motorOf(millMotor, ohms));
    // 1492 / (0.957 x 0.8) = 1948.80 kVA; base 4160^2 / 1948800 = 8.88013 ohm; 29.2 / 3 / 8.88013 = 1.09608
    expect(motor.machine.xdPu).toBeCloseTo(1.09608, 4);
    const unsaid = plateInput.safeParse({ ...(millMotor.plate as object), xdOhm: 29.2, xdPu: null });
    expect(unsaid.error?.issues[0]).toMatchObject({ path: ['connection'] });
  });

  it('reads metric horsepower as 735.5 W', async () => {
    const { opened } = await station();
    const motor = await createMotor(opened, motorOf(millMotor, { outputUnit: 'metric-hp', currentA: 267 }));
    expect(motor.machine.ratedOutputKw).toBeCloseTo(1471, 9);
  });

  it('is refused where its kVA contradict volts and amperes', async () => {
    const { opened } = await station();
    const error = await refusal(createMotor(opened, motorOf(millMotor, { apparentKva: 1492 })));
    expect(error.fields?.['plate.apparentKva']?.[0]).toContain('output in kW');
  });
});

describe('limits a person sets', () => {
  it('say which binds at either end of the voltage band', async () => {
    const { opened } = await station();
    const motor = await createMotor(
      opened,
      motorOf(
        millMotor,
        { limits: { voltageLowPu: 0.9, voltageHighPu: 1.1 } },
        {
          calendar: {
            ...(millMotor.calendar as object),
            rules: [{ days: ['Mon'], fromHour: 0, toHour: 24, load: 100, unit: 'percent' }],
          },
          fieldTodayA: 190,
        },
      ),
    );
    // At rated load the stator binds at low voltage, the field at high: CAP-VDEP of the reference, 0.512 below 0.600
    expect(motor.band?.low).toMatchObject({ voltagePu: 0.9, binding: 'armature' });
    expect(motor.band?.high).toMatchObject({ voltagePu: 1.1, binding: 'field' });
    expect(motor.capability.kvarDelivered).toBe(motor.band?.low.kvarDelivered);
    expect(motor.limits.voltageBandPu).toEqual({ low: 0.9, high: 1.1 });
  });

  it('want both ends of the band', () => {
    const half = plateInput.safeParse({ ...(millMotor.plate as object), limits: { voltageLowPu: 0.95 } });
    expect(half.error?.issues[0]).toMatchObject({ path: ['limits', 'voltageHighPu'] });
  });

  it('take the exciter’s rating for the lower field limit it is', async () => {
    const { opened } = await station();
    const motor = await createMotor(opened, motorOf(millMotor, { limits: { exciterOutputA: 170, leastPanelA: 120 } }));
    expect(motor.limits).toMatchObject({ fieldA: 170, fieldBy: 'exciter', leastFieldA: 120 });
    expect(motor.notes.map((note) => note.message).join(' ')).toContain('11.0 A below the least field');
  });

  it('are refused where no setting is left', async () => {
    const { opened } = await station();
    const error = await refusal(createMotor(opened, motorOf(millMotor, { limits: { leastPanelA: 210 } })));
    expect(error.fields?.['plate.limits.leastPanelA']?.[0]).toContain('no setting is left');
  });
});
