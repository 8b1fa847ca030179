import { intakeError, IntakeError } from './errors';
import { valueRoles, type Extraction } from './extract';
import type { IntervalPlan } from './intervals';
import type { ReadOptions } from './types';
import { mentions } from './words';

/** Several meters cannot be one load: the file's are listed for the person to pick. */
export function checkMeters(planned: IntervalPlan, options: ReadOptions): void {
  const { meters, plan } = planned;
  if (meters.length > 1 && plan.meter === undefined) {
    throw intakeError(
      `The file holds ${meters.length} meters: ${meters.slice(0, 20).join(', ')}${meters.length > 20 ? ' …' : ''}.`,
      options.fileName,
      'Pick one of them in the column map, then bring the file in again for the next.',
    );
  }
  if (plan.meter !== undefined && meters.length > 0 && !meters.includes(plan.meter)) {
    throw intakeError(
      `The column map picks the meter “${plan.meter}”, which the file does not have.`,
      `${options.fileName}, meters: ${meters.slice(0, 20).join(', ')}`,
      'Pick one of the meters in the file.',
    );
  }
}

/** Refuses a table without a stamp, without energy, or with columns that may be several meters. */
export function checkColumns(planned: IntervalPlan, options: ReadOptions): void {
  const { plan, columnMap } = planned;
  const isTimed = plan.columns.some((use) => ['stamp', 'stamp-begin', 'stamp-end', 'date'].includes(use.role));
  const where = `${options.fileName}, columns: ${plan.columns
    .map((use) => use.name || String(use.index + 1))
    .slice(0, 12)
    .join(', ')}`;
  if (!isTimed)
    throw intakeError(
      'No column holds the date and time of the readings.',
      where,
      'Say in the column map which column is the stamp, or which are date and time.',
    );
  if (plan.columns.some((use) => use.role === 'day-value' || use.role === 'value')) return;
  const active = plan.columns.filter((use) => use.role === 'active');
  if (!plan.columns.some((use) => valueRoles.has(use.role) && use.role !== 'export' && use.role !== 'power-factor')) {
    throw intakeError(
      'No column holds energy or power.',
      where,
      'Say in the column map which column is the energy drawn, and in which unit.',
    );
  }
  const isConfirmed =
    (options.columnMap?.columns ?? []).filter((use) => use.role === 'active').length === active.length;
  const isTou = active.every((use) => mentions(use.name, 'touRegister'));
  if (active.length > 1 && !isConfirmed && !isTou && columnMap.meter === undefined) {
    throw intakeError(
      `${active.length} columns may each be the energy drawn: ${active
        .map((use) => use.name || `column ${use.index + 1}`)
        .slice(0, 20)
        .join(', ')}. They may be several meters, or registers of one.`,
      options.fileName,
      'In the column map ignore all but one; or keep several as energy drawn, and they are added.',
    );
  }
}

/** Refuses a table whose stamps or figures mostly cannot be read; a few are left out with a note. */
export function checkExtraction(extraction: Extraction, options: ReadOptions): void {
  const readings = extraction.strands.reduce((sum, strand) => sum + strand.rows.length, 0);
  const problems = [];
  const list = (found: { place: string; text: string }[]): string =>
    found
      .slice(0, 5)
      .map(({ place, text }) => `${place}: “${text.slice(0, 40)}”`)
      .join('; ');
  const { badStamps, badValues, notes } = extraction;
  if (badStamps.length > Math.max(2, readings * 0.01)) {
    problems.push({
      message: `${badStamps.length} rows have a stamp that cannot be read as a date and time.`,
      where: `${options.fileName}, ${list(badStamps)}`,
      remedy: 'Check which columns are date and time and the order of day, month and year in the column map.',
    });
  } else if (badStamps.length > 0)
    notes.push({
      code: 'stamp-unreadable',
      message: `${badStamps.length} rows without a readable stamp are left out.`,
      where: list(badStamps),
    });
  if (badValues.length > Math.max(2, readings * 0.01)) {
    problems.push({
      message: `${badValues.length} cells that should hold figures hold words.`,
      where: `${options.fileName}, ${list(badValues)}`,
      remedy: 'Check which columns hold figures and the decimal mark in the column map.',
    });
  } else if (badValues.length > 0)
    notes.push({
      code: 'value-unreadable',
      message: `${badValues.length} cells hold no figure and count as missing.`,
      where: list(badValues),
    });
  if (readings === 0 && problems.length === 0)
    problems.push({
      message: 'The table holds no reading.',
      where: options.fileName,
      remedy: 'Check the first row of data and the columns in the column map.',
    });
  if (problems.length > 0) throw new IntakeError(problems);
}
