import * as z from 'zod';
import { field, group, optional, usually } from './fields.js';
import { anyQuantity, choice, list, orWord, price, quantity, type Reader, text, whole } from './readers.js';
import { anyTemperature, size, speed } from './schema-common.js';
import { materials } from './schema-materials.js';
import { operation } from './schema-operation.js';
import { rotor } from './schema-rotor.js';
import { winding } from './schema-winding.js';

const limits = group({
  controller_voltage: optional(
    quantity('voltage', { above: '0 V', to: '1e6 V' }, 'the highest DC voltage, for example 250 V'),
  ),
  winding_temperature: optional(anyTemperature('the highest temperature, for example 130 degC')),
});

const perWeight = optional(price('what a kilogram costs, for example 14 EUR/kg'));
const prices = group({ magnets: perWeight, copper: perWeight, steel: perWeight });

const spread = optional(anyQuantity('how far it may be off, for example 0.3 mm or 2 %'));
const tolerances = z.array(
  group({ key: field(text('a key of this file, for example rotor.gap')), normal: spread, uniform: spread }),
);

const peak = quantity('voltage', { from: '-1e6 V', to: '1e6 V' }, 'the signed peak, for example 20 V');
const measured = group({
  phase_emf: group({
    speed: field(speed('the speed of the test, for example 300 rpm')),
    order: field(list(whole(1, 1000, 'the order, 1 for the fundamental'), 1, 100, 'the orders, for example [1, 5]')),
    peak: field(list(peak, 1, 100, 'one peak for each order, for example [20 V, -1.6 V]')),
  }).optional(),
  phase_resistance: optional(
    quantity('resistance', { above: '0 ohm', to: '1e6 ohm' }, 'the resistance, for example 0.3 ohm'),
  ),
  phase_inductance: optional(
    quantity('inductance', { from: '0 H', to: '1e3 H' }, 'self less mutual, for example 1.5 mH'),
  ),
});

const sliceCount = whole(1, 101, 'an odd number of slices, for example 3, or a list of radii');
const sliceRadii = list(size('a radius, for example 100 mm'), 1, 15, 'at most 15 radii, for example [105 mm, 150 mm]');
const countOrRadii: Reader<number | readonly number[]> = (value) =>
  (Array.isArray(value) ? sliceRadii : sliceCount)(value);

const model = group({
  /** 3 where it is not said, auto for round magnets. */
  radii: optional<'auto' | number | readonly number[]>(orWord('auto', countOrRadii)),
  accuracy: usually(
    0.002,
    quantity('ratio', { from: '0.001 %', to: '20 %' }, 'the wanted relative error, for example 0.2 %'),
  ),
  end_correction: usually('on', choice(['on', 'off'])),
});

const common = {
  format: field(choice(['gapwright-machine/1'])),
  name: usually('unnamed machine', text('what the machine is called')),
  materials: materials.optional(),
  operation,
  limits: limits.optional(),
  prices: prices.optional(),
  tolerances: tolerances.optional(),
  model: model.prefault({}),
};

/** A machine that is to be computed. */
export const machineFile = group({ ...common, rotor, winding, measured: measured.optional() });

/** A machine known only by measurement. */
export const measuredFile = group({
  ...common,
  poles: field(whole(2, 1000, 'the number of poles, for example 16')),
  measured,
});

export type MachineFile = z.infer<typeof machineFile>;
export type ModelFile = MachineFile['model'];
