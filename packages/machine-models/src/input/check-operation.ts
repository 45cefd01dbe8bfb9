import { figure } from './format-figure.js';
import type { Report } from './report.js';
import type { MachineFile } from './schema.js';
import type { OperationFile } from './schema-operation.js';

/** Everything about operation, prices, tolerances and measurements that one key alone does not tell. */
export function checkOperation(file: MachineFile, report: Report): void {
  const { speed, overspeed = speed, cold, ambient } = file.operation;
  if (overspeed < speed) {
    report.warn(['operation', 'overspeed'], `${figure(overspeed)} rpm is less than the speed of ${figure(speed)} rpm`);
  }
  if (cold !== undefined && cold > ambient) {
    report.warn(['operation', 'cold'], `${figure(cold)} degC is warmer than the ambient ${figure(ambient)} degC`);
  }
  checkLoad(file.operation, report);
  checkPrimeMover(file.operation, report);
  checkPrices(file.prices, report);
  checkTolerances(file.tolerances, report);
  checkMeasured(file.measured, report);
}

function checkLoad({ load, cable, cooling }: OperationFile, report: Report): void {
  if (load?.kind === 'bridge') {
    exactlyOne(['operation', 'load'], load, ['voltage', 'resistance'], report);
  }
  if (cooling !== undefined) exactlyOne(['operation', 'cooling'], cooling, ['air_speed', 'h'], report);
  if (cable === undefined) return;
  const path = ['operation', 'cable'];
  exactlyOne(path, cable, ['resistance', 'length'], report);
  if ((cable.length === undefined) !== (cable.section === undefined)) {
    const missing = cable.length === undefined ? 'length' : 'section';
    report.fault([...path, missing], 'missing', 'is missing', 'a length and a section go together');
  }
}

function exactlyOne<K extends string>(
  path: readonly string[],
  values: Readonly<Partial<Record<K, unknown>>>,
  keys: readonly K[],
  report: Report,
): void {
  const given = keys.filter((key) => values[key] !== undefined);
  if (given.length === 1) return;
  const wrong = given.length === 0 ? `gives neither ${keys.join(' nor ')}` : `gives ${given.join(' and ')} at once`;
  report.fault(path, 'one-of', wrong, `give ${keys.join(' or ')}`);
}

function checkPrimeMover({ prime_mover }: OperationFile, report: Report): void {
  if (prime_mover?.kind !== 'table') return;
  const points = prime_mover.points as readonly (readonly [speed: number, power: number])[];
  for (const [i, [speed]] of points.entries()) {
    if (i > 0 && speed <= points[i - 1][0]) {
      const wrong = `the speeds must rise, got ${figure(speed)} rpm after ${figure(points[i - 1][0])} rpm`;
      report.fault(['operation', 'prime_mover', 'points', i], 'not-rising', wrong, 'order the points by speed');
    }
  }
}

function checkPrices(prices: MachineFile['prices'], report: Report): void {
  const given = Object.entries(prices ?? {}).flatMap(([key, price]) =>
    price && price.currency !== '' ? [{ key, ...price }] : [],
  );
  for (const { key, currency } of given.slice(1)) {
    if (currency === given[0].currency) continue;
    const wrong = `is in ${currency}, but ${given[0].key} is in ${given[0].currency}`;
    report.fault(['prices', key], 'mixed-currencies', wrong, 'give all prices in one currency');
  }
}

function checkTolerances(tolerances: MachineFile['tolerances'], report: Report): void {
  for (const [i, tolerance] of (tolerances ?? []).entries()) {
    exactlyOne(['tolerances', String(i)], tolerance, ['normal', 'uniform'], report);
    const spread = tolerance.normal ?? tolerance.uniform;
    if (spread && spread.value < 0) {
      const key = tolerance.normal === undefined ? 'uniform' : 'normal';
      report.fault(['tolerances', i, key], 'out-of-range', 'must be at least 0', 'give how far off on either side');
    }
  }
}

function checkMeasured(measured: MachineFile['measured'], report: Report): void {
  const emf = measured?.phase_emf;
  if (emf === undefined || emf.order.length === 0 || emf.peak.length === 0) return;
  if (emf.order.length !== emf.peak.length) {
    const wrong = `has ${emf.peak.length} values for ${emf.order.length} orders`;
    report.fault(['measured', 'phase_emf', 'peak'], 'wrong-count', wrong, 'give one peak for each order');
  }
}
