import type { Material, Setup } from '@gapwright/fem-core';
import type { Mesh } from '@gapwright/fem-core/mesh';
import type { Warning } from '../machine.js';
import type { SectionProblem } from './read-section.js';

/** What a drawing can be solved with, but hardly is meant: regions that later ones cover, and nothing that makes a field. */
export function drawingWarnings({ section, setup }: SectionProblem, mesh: Mesh): readonly Warning[] {
  const present = new Set(mesh.triangleToRegion);
  const isThere = (name: string): boolean => present.has(mesh.regionNames.indexOf(name));
  const warnings = section.regions.flatMap(({ name }, i): readonly Warning[] => {
    if (isThere(name)) return [];
    const text = `later regions cover all of it: ${lossOf(setup, name)}; draw it after them, or leave it out`;
    return [{ key: `regions.${i}`, text }];
  });
  const makesField = (name: string): boolean => isThere(name) && (carries(setup, name) || isMagnetic(setup, name));
  if (mesh.regionNames.some(makesField) || hasApplied(setup)) return warnings;
  const text = 'nothing makes a field: no current, no magnet, no applied field; all answers will be 0';
  return [...warnings, { key: 'regions', text }];
}

function lossOf(setup: Setup, name: string): string {
  if (isMagnetic(setup, name)) return 'this magnet does nothing';
  return carries(setup, name) ? 'its current flows nowhere' : 'it changes nothing';
}

const carries = ({ current = {}, currentDensity = {} }: Setup, name: string): boolean =>
  (current[name] ?? 0) !== 0 || (currentDensity[name] ?? 0) !== 0;

const isMagnetic = ({ materials }: Setup, name: string): boolean => hasRemanence(materials[name]);

function hasRemanence(material: Material | undefined): boolean {
  switch (material?.kind) {
    case 'magnet':
      return material.remanence.some((component) => component !== 0);
    case 'directed-magnet':
      return typeof material.along !== 'number' || material.along !== 0; // a curve starts at a remanence
    default:
      return false;
  }
}

const hasApplied = ({ edges = {} }: Setup): boolean =>
  Object.values(edges).some(
    (edge) => edge.kind === 'potential' || (edge.kind === 'applied' && edge.field.some((component) => component !== 0)),
  );
