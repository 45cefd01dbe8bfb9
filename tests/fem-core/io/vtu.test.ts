import { XMLParser } from 'fast-xml-parser';
import { describe, expect, test } from 'vitest';
import { writeVtu } from '../../../packages/fem-core/src/io/vtu.js';
import { nodeCount, triangleCount } from '../../../packages/fem-core/src/mesh/mesh.js';
import { atNodes, gridMesh } from './grid-mesh.js';

const mesh = gridMesh({
  from: [0, 0],
  to: [0.02, 0.01],
  columns: 3,
  rows: 2,
  regionNames: ['air', 'Eisen & <Stahl> "ü"'],
  regionAt: (x) => (x < 0.01 ? 0 : 1),
});
const potential = atNodes(mesh, (x, y) => 0.1 * x + 1e-17 * y + 1 / 3);
const fluxDensity = Float64Array.from({ length: 2 * triangleCount(mesh) }, (_, k) => Math.sin(k));
const relativePermeability = new Float64Array(triangleCount(mesh)).fill(1000);

interface DataArray {
  readonly '@type': string;
  readonly '@Name': string;
  readonly '@NumberOfComponents'?: string;
  readonly '#text': string;
}
interface Holder {
  readonly DataArray: readonly DataArray[];
}
interface Document {
  readonly VTKFile: {
    readonly '@type': string;
    readonly UnstructuredGrid: {
      readonly FieldData: Holder;
      readonly Piece: {
        readonly '@NumberOfPoints': string;
        readonly '@NumberOfCells': string;
        readonly PointData: Holder;
        readonly CellData: Holder;
        readonly Points: Holder;
        readonly Cells: Holder;
      };
    };
  };
}

function parse(text: string): Document {
  const parser = new XMLParser({
    ignoreAttributes: false,
    attributeNamePrefix: '@',
    parseTagValue: false,
    isArray: (name) => name === 'DataArray',
  });
  return parser.parse(text);
}

function numbers(holder: Holder, name: string): number[] {
  const array = holder.DataArray.find((candidate) => candidate['@Name'] === name);
  return array === undefined ? [] : array['#text'].split(' ').map(Number);
}

describe('a VTK file read back', () => {
  const { VTKFile } = parse(writeVtu({ mesh, potential, fluxDensity, relativePermeability }));
  const piece = VTKFile.UnstructuredGrid.Piece;

  test('holds every number that was written, to the last bit', () => {
    expect(VTKFile['@type']).toBe('UnstructuredGrid');
    expect(Number(piece['@NumberOfPoints'])).toBe(nodeCount(mesh));
    expect(Number(piece['@NumberOfCells'])).toBe(triangleCount(mesh));
    expect(numbers(piece.PointData, 'A')).toEqual([...potential]);
    const b = numbers(piece.CellData, 'B');
    expect(b.filter((_, k) => k % 3 < 2)).toEqual([...fluxDensity]);
    expect(b.filter((_, k) => k % 3 === 2).every((bz) => bz === 0)).toBe(true);
    expect(numbers(piece.CellData, 'mu_r')).toEqual([...relativePermeability]);
    expect(numbers(piece.CellData, 'region')).toEqual([...mesh.triangleToRegion]);
  });

  test('has quadratic triangles whose middle nodes lie half-way along the edges 0-1, 1-2 and 2-0', () => {
    const points = numbers(piece.Points, 'points');
    const nodes = numbers(piece.Cells, 'connectivity');
    expect(new Set(numbers(piece.Cells, 'types'))).toEqual(new Set([22]));
    expect(numbers(piece.Cells, 'offsets').at(-1)).toBe(nodes.length);
    for (let cell = 0; cell < nodes.length; cell += 6) {
      for (let k = 0; k < 3; k++) {
        const [a, b, middle] = [nodes[cell + k], nodes[cell + ((k + 1) % 3)], nodes[cell + 3 + k]];
        for (const axis of [0, 1, 2]) {
          expect(points[3 * middle + axis]).toBeCloseTo((points[3 * a + axis] + points[3 * b + axis]) / 2, 15);
        }
      }
    }
  });

  test('names its regions, whatever characters the names are of', () => {
    const bytes = numbers(VTKFile.UnstructuredGrid.FieldData, 'region_names');
    const names = new TextDecoder().decode(Uint8Array.from(bytes)).split('\0').slice(0, -1);
    expect(names).toEqual(mesh.regionNames);
  });
});

test('a VTK file without permeability has no array for it', () => {
  expect(writeVtu({ mesh, potential, fluxDensity })).not.toContain('mu_r');
});
