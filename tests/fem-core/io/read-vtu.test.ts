import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { InputError, readVtu, triangleMeans, writeVtu } from '@gapwright/fem-core';
import { meshSection, nodeCount, nodePoint, solveOnMesh, triangleCount, triangleNodes } from '@gapwright/fem-core/mesh';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';

const mesh = meshSection({
  outline: { kind: 'circle', centre: [0.01, 0], radius: 0.02 },
  background: 'Luft <&> "ü" 磁',
  regions: [{ name: 'bar', shape: { kind: 'rectangle', from: [0, -0.004], to: [0.006, 0.004] } }],
});
const { field } = solveOnMesh(mesh, {
  materials: {
    'Luft <&> "ü" 磁': { kind: 'linear', muR: 1 },
    bar: { kind: 'magnet', recoil: 1.05, remanence: [0.3, 1.1] },
  },
});
const means = triangleMeans(field);
const text = writeVtu({ mesh, potential: field.potential, ...means });

describe('a file written is read back', () => {
  const grid = readVtu(text);

  test('to the last bit: places, triangles and values', () => {
    const six = new Int32Array(6);
    for (let t = 0; t < triangleCount(mesh); t++) {
      expect(grid.cells.slice(6 * t, 6 * t + 6)).toEqual(triangleNodes(mesh, t, six));
    }
    for (let node = 0; node < nodeCount(mesh); node++) {
      expect([...grid.points.subarray(3 * node, 3 * node + 3)]).toEqual([...nodePoint(mesh, node), 0]);
    }
    expect(grid.pointData.get('A')?.values).toEqual(field.potential);
    expect(grid.cellData.get('mu_r')?.values).toEqual(means.relativePermeability);
    expect(grid.cellData.get('B')?.components).toBe(3);
    expect([...(grid.cellData.get('region')?.values ?? [])]).toEqual([...mesh.triangleToRegion]);
  });

  test('names of any characters come back', () => {
    expect(grid.texts.get('region_names')).toEqual(mesh.regionNames);
  });
});

/** One straight triangle with its points in base64 of the given type. */
function binaryFile(type: 'Float64' | 'Float32', header: 'UInt32' | 'UInt64', big: boolean): string {
  const values = [0, 0, 0, 1, 0, 0, 0, 0.5, 0];
  const size = type === 'Float64' ? 8 : 4;
  const skip = header === 'UInt64' ? 8 : 4;
  const bytes = Buffer.alloc(skip + size * values.length);
  const view = new DataView(bytes.buffer, bytes.byteOffset);
  if (skip === 8) view.setBigUint64(0, BigInt(size * values.length), !big);
  else view.setUint32(0, size * values.length, !big);
  values.forEach((value, i) => {
    if (size === 8) view.setFloat64(skip + 8 * i, value, !big);
    else view.setFloat32(skip + 4 * i, value, !big);
  });
  return oneTriangle(
    `<DataArray type="${type}" NumberOfComponents="3" format="binary">\n ${bytes.toString('base64')}\n</DataArray>`,
    `header_type="${header}" byte_order="${big ? 'BigEndian' : 'LittleEndian'}"`,
  );
}

const TRIANGLE_POINTS =
  '<DataArray type="Float64" NumberOfComponents="3" format="ascii">0 0 0 1 0 0 0 0.5 0</DataArray>';

function oneTriangle(points = TRIANGLE_POINTS, attributes = '', connectivity = '0 1 2'): string {
  return `<?xml version="1.0"?><VTKFile type="UnstructuredGrid" ${attributes}><UnstructuredGrid>
    <Piece NumberOfPoints="3" NumberOfCells="1"><Points>${points}</Points><Cells>
    <DataArray type="Int32" Name="connectivity" format="ascii">${connectivity}</DataArray>
    <DataArray type="Int64" Name="offsets" format="ascii">3</DataArray>
    <DataArray type="UInt8" Name="types" format="ascii">5</DataArray></Cells></Piece></UnstructuredGrid></VTKFile>`;
}

describe('other writers', () => {
  test.each([
    ['Float64', 'UInt32', false],
    ['Float64', 'UInt64', false],
    ['Float32', 'UInt32', true],
    ['Float64', 'UInt64', true],
  ] as const)('%s in base64 behind %s, big-endian %s', (type, header, big) => {
    const grid = readVtu(binaryFile(type, header, big));
    expect([...grid.points]).toEqual([0, 0, 0, 1, 0, 0, 0, 0.5, 0]);
    expect([grid.nodesPerCell, ...grid.cells]).toEqual([3, 0, 1, 2]);
  });

  test.each([
    ['', 'bad-vtu'],
    ['not xml <', 'is not XML'],
    ['<a/>', 'has no VTKFile'],
    ['<VTKFile type="PolyData"/>', 'give an UnstructuredGrid'],
    ['<VTKFile type="UnstructuredGrid" compressor="z"/>', 'is compressed'],
    ['<VTKFile type="UnstructuredGrid"><UnstructuredGrid><a/></UnstructuredGrid></VTKFile>', 'has no Piece'],
    [oneTriangle(undefined, '', '0 1 3'), 'names point 3'],
    [oneTriangle(undefined, '', '0 1'), 'do not fit the cells'],
    [oneTriangle(undefined, '', '0 1 x'), 'holds what is not a number'],
    [
      oneTriangle('<DataArray type="Float64" NumberOfComponents="3" format="ascii">0 0 0</DataArray>'),
      'hold 3 numbers',
    ],
    [oneTriangle('<DataArray type="Float64" NumberOfComponents="3" format="appended" offset="0"/>'), 'has format'],
    [oneTriangle('<DataArray type="Float64" NumberOfComponents="3" format="binary">AAAA</DataArray>'), 'is cut off'],
    [oneTriangle('<DataArray type="Float64" NumberOfComponents="3" format="binary">!!</DataArray>'), 'is not base64'],
    [oneTriangle('<DataArray type="Complex" NumberOfComponents="3" format="ascii">1</DataArray>'), 'is of type'],
  ])('are refused by name where they are wrong: %s', (file, wrong) => {
    expect(() => readVtu(file)).toThrow(InputError);
    if (wrong !== 'bad-vtu') expect(() => readVtu(file)).toThrow(wrong);
  });

  test('entities that grow are not expanded', () => {
    const bomb = `<!DOCTYPE a [<!ENTITY b "0 0 0 1 0 0 0 0.5 0">]>${oneTriangle(TRIANGLE_POINTS.replace(/0 0 0 .*?</, '&b;<')).replace(/<\?xml.*?\?>/, '')}`;
    expect(() => readVtu(bomb)).toThrow(InputError);
  });

  test('a file with any byte changed is read or refused, never a crash', () => {
    const file = oneTriangle();
    fc.assert(
      fc.property(fc.nat(file.length - 1), fc.string({ minLength: 0, maxLength: 3 }), (at, put) => {
        try {
          readVtu(file.slice(0, at) + put + file.slice(at + 1));
        } catch (error) {
          expect(error).toBeInstanceOf(InputError);
        }
      }),
      { seed: 7, numRuns: 500 },
    );
  });
});

/** The Python that has the general-purpose library VTK itself (Debian's python3-vtk9), if any has. */
const python = ['python3', '/usr/bin/python3'].find((name) => spawnSync(name, ['-c', 'import vtk']).status === 0);

test.runIf(python !== undefined)('a general reader opens the file and finds the same', () => {
  const folder = mkdtempSync(join(tmpdir(), 'vtu-'));
  try {
    const file = join(folder, 'field.vtu');
    writeFileSync(file, text);
    const program = [
      'import vtk, sys, json',
      'reader = vtk.vtkXMLUnstructuredGridReader()',
      'reader.SetFileName(sys.argv[1])',
      'reader.Update()',
      'grid = reader.GetOutput()',
      'a = grid.GetPointData().GetArray("A")',
      'names = grid.GetFieldData().GetAbstractArray("region_names")',
      'print(json.dumps([grid.GetNumberOfPoints(), grid.GetNumberOfCells(), grid.GetCellType(0),',
      '  [a.GetValue(i) for i in range(a.GetNumberOfTuples())], [names.GetValue(i) for i in range(names.GetNumberOfValues())]]))',
    ].join('\n');
    const { stdout, stderr, status } = spawnSync(python ?? '', ['-c', program, file], { encoding: 'utf8' });
    expect([status, stderr]).toEqual([0, '']);
    expect(JSON.parse(stdout)).toEqual([
      nodeCount(mesh),
      triangleCount(mesh),
      22, // VTK_QUADRATIC_TRIANGLE
      [...field.potential],
      mesh.regionNames,
    ]);
  } finally {
    rmSync(folder, { recursive: true });
  }
});
