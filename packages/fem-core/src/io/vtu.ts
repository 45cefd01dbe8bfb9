import { XMLBuilder } from 'fast-xml-parser';
import { type Mesh, nodeCount, nodePoint, triangleCount, triangleNodes } from '../mesh/mesh.js';

/** A solved section as VTK sees it; cell values are per triangle, as they jump between triangles. */
export interface VtuData {
  /** m triangles, n + e nodes. */
  readonly mesh: Mesh;
  /** Float64Array(n + e): vector potential at every node, Wb/m. */
  readonly potential: Float64Array;
  /** Float64Array(2m): Bx and By of each triangle, T. */
  readonly fluxDensity: Float64Array;
  /** Float64Array(m): relative permeability of each triangle, where it is known. */
  readonly relativePermeability?: Float64Array;
}

/** VTK_QUADRATIC_TRIANGLE, whose middle nodes lie on the edges 0-1, 1-2, 2-0 (VTK File Formats, "Linear Cell Types" ff.). */
const quadraticTriangle = 22;
/** Our middle nodes lie opposite the corners 0, 1, 2: on the edges 1-2, 2-0, 0-1. */
const toVtkOrder = [0, 1, 2, 5, 3, 4] as const;

/**
 * VTK XML of an unstructured grid of quadratic triangles in the plane z = 0: point data `A` (Wb/m), cell data `B`
 * (T, three components), `region` (a number into the field data `region_names`) and, where given, `mu_r`.
 * Numbers are ASCII with all their digits, so the file holds exactly what was computed.
 */
export function writeVtu(data: VtuData): string {
  const { mesh } = data;
  const nodes = nodeCount(mesh);
  const cells = triangleCount(mesh);
  const piece = {
    '@NumberOfPoints': nodes,
    '@NumberOfCells': cells,
    PointData: { '@Scalars': 'A', DataArray: [floats('A', data.potential)] },
    CellData: {
      '@Vectors': 'B',
      DataArray: [
        floats('B', inSpace(data.fluxDensity), 3),
        integers('region', mesh.triangleToRegion),
        ...(data.relativePermeability === undefined ? [] : [floats('mu_r', data.relativePermeability)]),
      ],
    },
    Points: { DataArray: [floats('points', points(mesh), 3)] },
    Cells: {
      DataArray: [
        integers('connectivity', connectivity(mesh)),
        integers(
          'offsets',
          Int32Array.from({ length: cells }, (_, t) => 6 * (t + 1)),
        ),
        array('UInt8', 'types', new Uint8Array(cells).fill(quadraticTriangle)),
      ],
    },
  };
  const grid = { FieldData: { DataArray: [regionNames(mesh)] }, Piece: piece };
  const file = {
    '@type': 'UnstructuredGrid',
    '@version': '1.0',
    '@byte_order': 'LittleEndian',
    UnstructuredGrid: grid,
  };
  return build({ '?xml': { '@version': '1.0', '@encoding': 'UTF-8' }, VTKFile: file });
}

/** `@name` keys become attributes, `#text` the content. */
function build(document: object): string {
  return new XMLBuilder({
    ignoreAttributes: false,
    attributeNamePrefix: '@',
    textNodeName: '#text',
    format: true,
    indentBy: ' ',
  }).build(document);
}

type Numbers = Float64Array | Int32Array | Uint8Array;

function array(type: string, name: string, values: Numbers, components = 1): Readonly<Record<string, string | number>> {
  const shape: Record<string, number> = components === 1 ? {} : { '@NumberOfComponents': components };
  return { '@type': type, '@Name': name, ...shape, '@format': 'ascii', '#text': values.join(' ') };
}

const floats = (name: string, values: Float64Array, components = 1) => array('Float64', name, values, components);
const integers = (name: string, values: Int32Array) => array('Int32', name, values);

function points(mesh: Mesh): Float64Array {
  const xyz = new Float64Array(3 * nodeCount(mesh));
  for (let node = 0; node < nodeCount(mesh); node++) xyz.set(nodePoint(mesh, node), 3 * node);
  return xyz;
}

function inSpace(plane: Float64Array): Float64Array {
  const xyz = new Float64Array((3 * plane.length) / 2);
  for (let k = 0; 2 * k < plane.length; k++) xyz.set([plane[2 * k], plane[2 * k + 1]], 3 * k);
  return xyz;
}

function connectivity(mesh: Mesh): Int32Array {
  const nodes = new Int32Array(6 * triangleCount(mesh));
  const six = new Int32Array(6);
  for (let t = 0; t < triangleCount(mesh); t++) {
    triangleNodes(mesh, t, six);
    for (let k = 0; k < 6; k++) nodes[6 * t + k] = six[toVtkOrder[k]];
  }
  return nodes;
}

/** VTK holds texts in ASCII files as the numbers of their UTF-8 bytes, each text ended by a 0. */
function regionNames(mesh: Mesh): Readonly<Record<string, string | number>> {
  const bytes = mesh.regionNames.flatMap((name) => [...utf8(name), 0]);
  return {
    '@type': 'String',
    '@Name': 'region_names',
    '@NumberOfTuples': mesh.regionNames.length,
    '@format': 'ascii',
    '#text': bytes.join(' '),
  };
}

function utf8(text: string): number[] {
  const wellFormed = text.replace(/\p{Surrogate}/gu, '\ufffd');
  const escaped = encodeURIComponent(wellFormed).match(/%..|./g) ?? [];
  return escaped.map((part) => (part.length === 3 ? Number.parseInt(part.slice(1), 16) : part.charCodeAt(0)));
}
