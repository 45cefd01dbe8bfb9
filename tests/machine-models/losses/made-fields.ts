import type { WindingField } from '../../../packages/machine-models/src/losses/winding-field.js';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { closedFormSlices } from '../../helpers/machines.js';

/** The field between ideal discs, without a mesh. */
export function closedFormFields(machine: Machine, orders = 12): readonly WindingField[] {
  return closedFormSlices(machine).map(({ radius, weight, polePitch, windingB }) => ({
    radius,
    weight,
    polePitch,
    thickness: machine.winding.thickness,
    order: windingB.order.slice(0, orders),
    axial: windingB.amplitude.slice(0, orders),
    tangential: windingB.order.slice(0, orders).map(() => 0),
  }));
}
