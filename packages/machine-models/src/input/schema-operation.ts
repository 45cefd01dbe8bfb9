import * as z from 'zod';
import { field, group, optional, usually, variants } from './fields.js';
import { list, pair, quantity } from './readers.js';
import { anyTemperature, speed, temperature } from './schema-common.js';

const voltage = quantity('voltage', { above: '0 V', to: '1e6 V' }, 'the DC voltage, for example 106 V');
const resistance = quantity('resistance', { above: '0 ohm', to: '1e9 ohm' }, 'the resistance, for example 6 ohm');
const power = quantity('power', { from: '0 W', to: '1e9 W' }, 'the power at the shaft, for example 1160 W');

const load = variants('kind', [
  group({
    kind: z.literal('bridge'),
    voltage: optional(voltage),
    resistance: optional(resistance),
    diode_drop: optional(quantity('voltage', { from: '0 V', to: '100 V' }, 'the drop of one diode, for example 0.9 V')),
  }),
  group({ kind: z.literal('resistor'), resistance: field(resistance) }),
  group({
    kind: z.literal('drive'),
    current: field(quantity('current', { from: '0 A', to: '1e6 A' }, 'the rms current per phase, for example 8 A')),
  }),
]);

const cable = group({
  resistance: optional(quantity('resistance', { from: '0 ohm', to: '1e6 ohm' }, 'the resistance of one conductor')),
  length: optional(quantity('length', { from: '0 m', to: '100 km' }, 'the distance, for example 40 m')),
  section: optional(
    quantity('area', { above: '0 mm2', to: '1 m2' }, 'the section of one conductor, for example 6 mm2'),
  ),
});

const drag = group({
  bearing: usually(0, quantity('torque', { from: '0 Nm', to: '1e6 Nm' }, 'the constant torque, for example 0.15 Nm')),
  windage: usually(
    0,
    quantity(
      'dragFactor',
      { from: '0 Nm.s2', to: '1e6 Nm.s2' },
      'the torque over speed squared, for example 2e-6 Nm.s2',
    ),
  ),
});

const cooling = group({
  air_speed: optional(
    quantity('velocity', { from: '0 m/s', to: '1000 m/s' }, 'the speed of the air, for example 5 m/s'),
  ),
  h: optional(quantity('heatTransfer', { above: '0 W/m2K', to: '1e6 W/m2K' }, 'the coefficient, for example 30 W/m2K')),
});

const primeMover = variants('kind', [
  group({
    kind: z.literal('table'),
    points: field(
      list(
        pair(speed('a speed'), power, 'a speed and a power'),
        2,
        1000,
        'points [speed, power], for example [300 rpm, 400 W]',
      ),
    ),
  }),
  // Their keys come with the version that works them out.
  z.looseObject({ kind: z.literal('wind') }),
  z.looseObject({ kind: z.literal('hydro') }),
  z.looseObject({ kind: z.literal('engine') }),
]);

export const operation = group({
  speed: field(speed('the speed of the rotor, for example 420 rpm')),
  overspeed: optional(speed('the highest speed, for example 756 rpm')),
  ambient: temperature('the temperature of the air, for example 15 degC'),
  cold: optional(anyTemperature('the temperature of the coldest start, for example -10 degC')),
  load: load.optional(),
  cable: cable.optional(),
  drag: drag.optional(),
  cooling: cooling.optional(),
  prime_mover: primeMover.optional(),
});
export type OperationFile = z.infer<typeof operation>;
