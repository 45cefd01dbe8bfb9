import type { Magnets } from '../machine.js';
import { magnetReach } from '../rotor/magnet-shape.js';
import { autoRadii, polynomialRadii, type SliceRadius, simpsonRadii } from '../rotor/slice-radii.js';
import { HAIR, millimetres } from './format-figure.js';
import type { Report } from './report.js';
import type { ModelFile } from './schema.js';

/** Weights that add up, taken positive, to more than this many times the length blow up errors from slice to slice. */
const MOST_AMPLIFICATION = 2;

/**
 * `model.radii`, or what is usual where it is not said: inner, mean and outer radius, for round magnets, whose width vanishes
 * at both ends, a choice of its own.
 */
export function radiiOf(
  { radii }: ModelFile,
  { shape }: { readonly shape: Magnets['shape'] },
): 'auto' | number | readonly number[] {
  return radii ?? (shape === 'round' ? 'auto' : 3);
}

/** The slices that `model.radii` asks for; none where it asks for something impossible, which is told. */
export function chooseSlices(model: ModelFile, magnets: Magnets, report: Report): readonly SliceRadius[] {
  const radii = radiiOf(model, magnets);
  const { inner, outer } = magnetReach(magnets);
  if (radii === 'auto') return inner > 0 ? autoRadii(magnets, 0) : [];
  if (typeof radii === 'number') {
    if (radii % 2 === 0) {
      const remedy = `give ${radii - 1 > 0 ? `${radii - 1} or ` : ''}${radii + 1}, or a list of radii`;
      report.fault(['model', 'radii'], 'even-count', `Simpson's rule needs an odd number, got ${radii}`, remedy);
    }
    if (magnets.shape === 'round') warnRound(radii, report);
    return radii % 2 === 1 ? simpsonRadii(inner, outer, radii) : [];
  }
  return checkList(radii, inner, outer, report) ? weigh(radii, inner, outer, report) : [];
}

/** Their width vanishes like a square root at both ends, where a rule for smooth functions has its worst. */
function warnRound(count: number, report: Report): void {
  const off = Math.abs(simpsonOfHalfDisc(count) / (Math.PI / 2) - 1);
  report.warn(
    ['model', 'radii'],
    `${count} evenly spaced radii serve round magnets badly: EMF and flux are about ${(100 * off).toPrecision(2)} % off; give auto`,
  );
}

/** Simpson's rule for the area of half a disc of radius 1, which is pi/2. */
function simpsonOfHalfDisc(count: number): number {
  return simpsonRadii(-1, 1, count).reduce(
    (sum, { radius, weight }) => sum + weight * Math.sqrt(1 - radius * radius),
    0,
  );
}

function checkList(radii: readonly number[], inner: number, outer: number, report: Report): boolean {
  const reach = `the magnets reach from ${millimetres(inner)} to ${millimetres(outer)}`;
  let fine = radii.length > 0 && inner > 0;
  for (const [i, radius] of radii.entries()) {
    const path = ['model', 'radii', i];
    if (radius < inner - HAIR || radius > outer + HAIR) {
      report.fault(path, 'out-of-range', `${reach}, got ${millimetres(radius)}`, 'give radii within the magnets');
    }
    if (i > 0 && radius <= radii[i - 1]) {
      const wrong = `must be more than the radius before, ${millimetres(radii[i - 1])}, got ${millimetres(radius)}`;
      report.fault(path, 'not-rising', wrong, 'order the radii, each once');
    }
    fine &&= radius >= inner - HAIR && radius <= outer + HAIR && !(i > 0 && radius <= radii[i - 1]);
  }
  return fine;
}

function weigh(radii: readonly number[], inner: number, outer: number, report: Report): readonly SliceRadius[] {
  const slices = polynomialRadii(inner, outer, radii);
  const amplification = slices.reduce((sum, { weight }) => sum + Math.abs(weight), 0) / (outer - inner);
  if (amplification > MOST_AMPLIFICATION) {
    report.warn(
      ['model', 'radii'],
      `the polynomial through these radii swings: errors of the slices count ${amplification.toPrecision(2)} times; ` +
        'spread the radii over the whole length of the magnets, more densely towards its ends',
    );
  }
  return slices;
}
