import type { Fault } from '../base/fault.js';
import { InputError } from '../base/fault.js';
import { unreachable } from '../base/unreachable.js';
import { regionAreas } from '../elements/areas.js';
import type { Material } from '../materials/material.js';
import type { Mesh } from '../mesh/mesh.js';
import type { EdgeCondition, Setup } from './setup.js';
import { materialOf } from './setup.js';

const CONDITIONS: readonly EdgeCondition['kind'][] = [
  'closed',
  'crossing',
  'repeating',
  'reversing',
  'applied',
  'potential',
];

/**
 * Checks what the types do not: plain JavaScript may hand over anything, and names may be mistyped.
 * @throws InputError with everything wrong: regions without a material, materials that cannot be, currents of regions that do
 * not exist or cover nothing, numbers that are not finite, unknown edge conditions, directions that do not come back to
 * themselves
 */
export function checkSetup(mesh: Mesh, setup: Setup): void {
  if (typeof setup !== 'object' || setup === null) {
    const wrong = `must be an object, got ${String(setup)}`;
    throw new InputError([{ code: 'bad-form', key: 'setup', wrong, remedy: 'give materials by region' }]);
  }
  const faults = [
    ...keyFaults(setup),
    ...materialFaults(mesh, setup),
    ...currentFaults(mesh, setup),
    ...edgeFaults(setup),
  ];
  if (faults.length > 0) throw new InputError(faults);
}

/** The part of it that concerns materials. */
export function checkMaterials(mesh: Mesh, setup: Setup): void {
  const faults = [...materialFaults(mesh, setup)];
  if (faults.length > 0) throw new InputError(faults);
}

const KEYS = ['materials', 'currentDensity', 'current', 'edges'];

function* keyFaults(setup: Setup): Generator<Fault> {
  for (const key of Object.keys(setup)) {
    if (KEYS.includes(key)) continue;
    yield { code: 'unknown-key', key, wrong: 'is no part of a setup', remedy: `parts are: ${KEYS.join(', ')}` };
  }
}

function* currentFaults(mesh: Mesh, setup: Setup): Generator<Fault> {
  const areas = regionAreas(mesh);
  for (const group of ['current', 'currentDensity'] as const) {
    for (const [name, value] of Object.entries(setup[group] ?? {})) {
      const key = `${group}.${name}`;
      const region = mesh.regionNames.indexOf(name);
      if (typeof value !== 'number' || !Number.isFinite(value)) {
        yield {
          code: 'not-finite',
          key,
          wrong: `must be a finite number, got ${String(value)}`,
          remedy: 'give amperes',
        };
      } else if (region < 0) {
        yield {
          code: 'no-region',
          key,
          wrong: 'is no region',
          remedy: `regions here are: ${mesh.regionNames.join(', ')}`,
        };
      } else if (group === 'current' && value !== 0 && areas[region] === 0) {
        const wrong = `has ${value} A to carry, but later regions cover all of it`;
        yield { code: 'covered', key, wrong, remedy: 'draw it later, or leave its current out' };
      }
    }
  }
}

function* edgeFaults(setup: Setup): Generator<Fault> {
  for (const [side, condition] of Object.entries(setup.edges ?? {})) {
    const key = `edges.${side}`;
    const kind: unknown = condition?.kind;
    if (!CONDITIONS.some((known) => known === kind)) {
      const wrong = `is of an unknown kind, ${String(kind)}`;
      yield { code: 'bad-form', key, wrong, remedy: `kinds are: ${CONDITIONS.join(', ')}` };
    } else if (condition.kind === 'applied' && condition.field?.length !== 2) {
      yield { code: 'bad-form', key, wrong: 'has no field of two components', remedy: 'give [Bx, By] in tesla' };
    } else if (condition.kind === 'potential' && typeof condition.value !== 'function') {
      yield { code: 'bad-form', key, wrong: 'has no function of place', remedy: 'give A in Wb/m by (x, y) in metres' };
    }
  }
}

/** Curves are judged where they are built. */
function* materialFaults(mesh: Mesh, setup: Setup): Generator<Fault> {
  for (const [region, key] of mesh.regionNames.entries()) {
    const material = materialOf(setup, key);
    if (material === undefined) {
      if (!mesh.triangleToRegion.includes(region)) continue;
      yield { code: 'no-material', key, wrong: 'has no material', remedy: 'name it in the setup' };
      continue;
    }
    const wrongForm = formFault(material);
    if (wrongForm !== undefined) {
      yield { code: 'bad-form', key, wrong: wrongForm, remedy: 'see `Material` for what each kind wants' };
      continue;
    }
    const { positive, others } = figuresOf(material);
    if (!(positive > 0) || ![positive, ...others].every(Number.isFinite)) {
      const wrong = `is filled with ${material.kind} material of figures ${[positive, ...others].join(', ')}`;
      yield { code: 'no-material', key, wrong, remedy: 'give finite figures, and a permeability above 0' };
    } else if (material.kind === 'directed-magnet' && !Number.isInteger(material.direction.turns ?? 0)) {
      const wrong = `turns ${String(material.direction.turns)} times round its centre, and so has a seam`;
      yield { code: 'bad-form', key, wrong, remedy: 'give a whole number of turns' };
    }
  }
}

/** What of its kind a material lacks. */
function formFault(material: Material): string | undefined {
  const isCurve = (curve: unknown): boolean =>
    typeof curve === 'object' && curve !== null && 'energy' in curve && ArrayBuffer.isView(curve.energy);
  switch (material.kind) {
    case 'linear':
      return undefined;
    case 'magnet':
      return material.remanence?.length === 2 ? undefined : 'is a magnet without a remanence of two components';
    case 'directed-magnet':
      if (typeof material.direction !== 'object') return 'is a magnet without a direction';
      if (typeof material.along === 'number' || isCurve(material.along)) return undefined;
      return 'is a magnet with neither a remanence nor a built curve along its direction';
    case 'curve':
      return isCurve(material.curve) ? undefined : 'is of a curve that is not built';
    default:
      return `is filled with an unknown kind of material, ${String((material satisfies never as Material).kind)}`;
  }
}

/** Numbers that define a material: a relative permeability, and others of either sign. */
function figuresOf(material: Material): { readonly positive: number; readonly others: readonly number[] } {
  switch (material.kind) {
    case 'linear':
      return { positive: material.muR, others: [] };
    case 'magnet':
      return { positive: material.recoil, others: material.remanence };
    case 'directed-magnet': {
      const { direction, recoil, along } = material;
      const { angle, turns = 0, centre = [], gradient = [] } = direction;
      const strength = typeof along === 'number' ? [along] : [];
      return { positive: recoil, others: [angle, turns, ...centre, ...gradient, ...strength] };
    }
    case 'curve':
      return { positive: 1, others: [] };
    default:
      return unreachable(material);
  }
}
