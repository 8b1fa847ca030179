import type { LoadSeries } from '../../load';
import { wordNumber } from '../../units';
import type { BillState } from '../price/bill-state';
import type { PeriodGround } from '../price/interval-source';

/** Notes missing and estimated intervals of a bill's period, and a series coarser than the demand window. */
export function addLoadNotes(bill: BillState, { count, first, end }: PeriodGround, load: LoadSeries): void {
  let missing = count - (end - first);
  let estimated = 0;
  for (let i = first; i < end; i++) {
    if (load.quality[i] === 2) missing++;
    else if (load.quality[i] === 1) estimated++;
  }
  const all = wordNumber(count);
  if (missing > 0)
    bill.notes?.add(
      `${wordNumber(missing)} of ${all} intervals are missing: sums are of what is there, never scaled up.`,
    );
  if (estimated > 0) bill.notes?.add(`${wordNumber(estimated)} of ${all} intervals are estimated.`);
  for (const { piece } of bill.pieces) noteDemandWindow(bill, piece.text.text, load.stepMinutes);
}

function noteDemandWindow(
  bill: BillState,
  { demandWindow, quantities }: BillState['pieces'][number]['piece']['text']['text'],
  stepMinutes: number,
): void {
  const uses = quantities.some(
    ({ definition }) => definition.kind === 'measure' && definition.each === 'demand window',
  );
  if (!uses) return;
  if (!demandWindow)
    bill.notes?.add(`The schedule does not say its demand window: the series' ${stepMinutes} minutes are taken.`);
  else if (demandWindow.minutes < stepMinutes) {
    bill.notes?.add(
      `The series' step of ${stepMinutes} minutes is longer than the demand window of ${demandWindow.minutes}: the step is taken as the window.`,
    );
  }
}
