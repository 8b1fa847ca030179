import { fieldCurrentAtPanelA, panelCurrentA } from '../../core/machine';
import type { MachineView } from '../../schemas/motor';
import { formatQuantity } from '../ui/format';

/** The ammeter a person reads and sets a motor's field by: of a brushless machine that of the exciter's field. */
export interface FieldMeter {
  /** "Field current", or "Exciter field current". */
  name: string;
  decimals: number;
  /** Step of a setting. [A] */
  stepA: number;
  /** What it shows at a current of the motor's own field. [A] */
  shownA: (fieldA: number) => number;
  /** The motor's own field at what it shows. [A] */
  fieldA: (shownA: number) => number;
  /** "164 A", "2.73 A". */
  words: (fieldA: number) => string;
}

/** The field's ammeter of a motor. */
export function fieldMeter(machine: MachineView): FieldMeter {
  const brushless = machine.exciterField !== undefined;
  const decimals = brushless ? 2 : 1;
  const shownA = (fieldA: number) => panelCurrentA(machine, fieldA);
  return {
    name: brushless ? 'Exciter field current' : 'Field current',
    decimals,
    stepA: brushless ? 0.05 : machine.ratedFieldCurrentA < 20 ? 0.1 : 1,
    shownA,
    fieldA: (shown) => fieldCurrentAtPanelA(machine, shown),
    words: (fieldA) => formatQuantity(shownA(fieldA), 'A', { upTo: decimals }),
  };
}
