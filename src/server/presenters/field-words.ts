import { panelCurrentA, type SynchronousMotor } from '../../core/machine';
import { wordNumber } from '../../core/units';

/** A field current as the motor's ammeter shows it: "109 A", of a brushless machine "2.73 A of exciter field". */
export function fieldWords(machine: SynchronousMotor, fieldA: number): string {
  const shown = panelCurrentA(machine, fieldA);
  return machine.exciterField
    ? `${wordNumber(shown, 0.01)} A of exciter field`
    : `${wordNumber(shown, 0.1).replace(/\.0$/, '')} A`;
}
