import { XMLParser, XMLValidator } from 'fast-xml-parser';
import { decodeBase64 } from '../base/base64.js';
import { InputError } from '../base/fault.js';
import { showText } from './show.js';

/** Values of one name. */
export interface VtuArray {
  /** Numbers in each tuple. */
  readonly components: number;
  /** Float64Array(components x tuples), tuple by tuple. */
  readonly values: Float64Array;
}

/** What a VTK XML file of triangles holds. n points, m cells. */
export interface VtuGrid {
  /** Float64Array(3n): x, y, z of the points. */
  readonly points: Float64Array;
  /** 3 for straight triangles, 6 for quadratic ones. */
  readonly nodesPerCell: 3 | 6;
  /** Int32Array(nodesPerCell m): corners counter-clockwise as stored, then the middles opposite the corners 0, 1, 2. */
  readonly cells: Int32Array;
  /** By name, a tuple a point. */
  readonly pointData: ReadonlyMap<string, VtuArray>;
  /** By name, a tuple a cell. */
  readonly cellData: ReadonlyMap<string, VtuArray>;
  /** Texts of the field data, such as `region_names`. */
  readonly texts: ReadonlyMap<string, readonly string[]>;
}

/** Largest file read, in characters: some millions of triangles. */
const MOST_CHARACTERS = 512 * 1024 * 1024;

/** VTK_TRIANGLE and VTK_QUADRATIC_TRIANGLE (VTK File Formats). */
const NODES_OF_TYPE: Readonly<Record<number, 3 | 6>> = { 5: 3, 22: 6 };
/** VTK's middle nodes lie on the edges 0-1, 1-2, 2-0; ours opposite the corners 0, 1, 2. */
const FROM_VTK = [0, 1, 2, 4, 5, 3] as const;

/**
 * Reads a VTK XML unstructured grid of one piece, of straight or of quadratic triangles alone; arrays as ASCII, or as base64
 * in place and uncompressed. `writeVtu`'s files come back to the last bit.
 * @throws InputError for what is not such a file: it says which part
 */
export function readVtu(text: string): VtuGrid {
  if (text.length > MOST_CHARACTERS)
    throw fault('file', `is ${text.length} characters long`, `give at most ${MOST_CHARACTERS}`);
  const file = child(parse(text), 'VTKFile', 'file');
  if (file['@type'] !== 'UnstructuredGrid')
    throw fault('VTKFile', `holds ${showText(String(file['@type']))}`, 'give an UnstructuredGrid');
  if (file['@compressor'] !== undefined)
    throw fault('VTKFile', 'is compressed', 'write it as ASCII or as plain binary');
  const format = formatOf(file);
  const grid = child(file, 'UnstructuredGrid', 'VTKFile');
  const piece = child(grid, 'Piece', 'UnstructuredGrid');
  const n = count(piece, '@NumberOfPoints');
  const m = count(piece, '@NumberOfCells');
  const points = onlyArray(child(piece, 'Points', 'Piece'), format, 'Points');
  if (points.components !== 3 || points.values.length !== 3 * n)
    throw fault('Points', `hold ${points.values.length} numbers`, `give three for each of ${n} points`);
  const { nodesPerCell, cells } = cellsOf(child(piece, 'Cells', 'Piece'), format, n, m);
  return {
    points: points.values,
    nodesPerCell,
    cells,
    pointData: arraysOf(piece.PointData, format, n, 'PointData'),
    cellData: arraysOf(piece.CellData, format, m, 'CellData'),
    texts: textsOf(grid.FieldData),
  };
}

type Element = Readonly<Record<string, unknown>>;

const parser = (): XMLParser =>
  new XMLParser({
    ignoreAttributes: false,
    attributeNamePrefix: '@',
    textNodeName: '#text',
    parseTagValue: false,
    parseAttributeValue: false,
    processEntities: false, // numbers need none, and declared ones can grow without end
    isArray: (name) => name === 'DataArray' || name === 'Array',
  });

function parse(text: string): unknown {
  try {
    const valid = XMLValidator.validate(text);
    if (valid === true) return parser().parse(text);
    throw new Error(`${valid.err.msg} (line ${valid.err.line})`);
  } catch (error) {
    throw fault('file', `is not XML: ${showText(String(error))}`, 'give a whole VTK XML file');
  }
}

function fault(key: string, wrong: string, remedy: string): InputError {
  return new InputError([{ code: 'bad-vtu', key, wrong, remedy }]);
}

const isElement = (value: unknown): value is Element =>
  typeof value === 'object' && value !== null && !Array.isArray(value);

function child(parent: unknown, name: string, of: string): Element {
  const value = isElement(parent) ? parent[name] : undefined;
  if (isElement(value)) return value;
  throw fault(of, Array.isArray(value) ? `has several ${name}` : `has no ${name}`, `give one ${name} in it`);
}

function count(piece: Element, name: string): number {
  const value = Number(piece[name]);
  if (Number.isSafeInteger(value) && value >= 0 && value <= 1e8) return value;
  throw fault('Piece', `has ${name.slice(1)} ${showText(String(piece[name]))}`, 'give a whole number');
}

/** How base64 arrays are laid out: bytes of the length before each, and their order. */
interface Format {
  readonly headerBytes: 4 | 8;
  readonly littleEndian: boolean;
}

function formatOf(file: Element): Format {
  return {
    headerBytes: file['@header_type'] === 'UInt64' ? 8 : 4,
    littleEndian: file['@byte_order'] !== 'BigEndian',
  };
}

function arraysOf(holder: unknown, format: Format, tuples: number, of: string): Map<string, VtuArray> {
  const arrays = new Map<string, VtuArray>();
  for (const [i, element] of dataArrays(holder).entries()) {
    const name = typeof element['@Name'] === 'string' ? element['@Name'] : String(i);
    const array = readArray(element, format, `${of} ${showText(name)}`);
    if (array.values.length !== array.components * tuples) {
      throw fault(
        `${of} ${showText(name)}`,
        `holds ${array.values.length} numbers`,
        `give ${array.components} for each of ${tuples}`,
      );
    }
    arrays.set(name, array);
  }
  return arrays;
}

const dataArrays = (holder: unknown): readonly Element[] =>
  isElement(holder) && Array.isArray(holder.DataArray) ? holder.DataArray.filter(isElement) : [];

function onlyArray(holder: Element, format: Format, of: string): VtuArray {
  const [first] = dataArrays(holder);
  if (first === undefined) throw fault(of, 'has no DataArray', 'give one DataArray in it');
  return readArray(first, format, of);
}

function cellsOf(
  holder: Element,
  format: Format,
  n: number,
  m: number,
): { readonly nodesPerCell: 3 | 6; readonly cells: Int32Array } {
  const named = (name: string): Float64Array => {
    const element = dataArrays(holder).find((candidate) => candidate['@Name'] === name);
    if (element === undefined) throw fault('Cells', `have no ${name}`, `give a DataArray of that name`);
    return readArray(element, format, `Cells ${name}`).values;
  };
  const types = named('types');
  const nodesPerCell = NODES_OF_TYPE[types[0]] ?? 6;
  if (types.length !== m || types.some((type) => NODES_OF_TYPE[type] !== nodesPerCell)) {
    throw fault('Cells types', 'are not all triangles of one kind', `give ${m} times 5 (straight) or 22 (quadratic)`);
  }
  const offsets = named('offsets');
  const connectivity = named('connectivity');
  if (
    offsets.length !== m ||
    offsets.some((end, t) => end !== nodesPerCell * (t + 1)) ||
    connectivity.length !== nodesPerCell * m
  ) {
    throw fault('Cells offsets', 'do not fit the cells', `let each cell have ${nodesPerCell} points`);
  }
  const cells = new Int32Array(connectivity.length);
  for (let i = 0; i < cells.length; i++) {
    const at = nodesPerCell === 6 ? i - (i % 6) + FROM_VTK[i % 6] : i;
    const node = connectivity[at];
    if (!(Number.isInteger(node) && node >= 0 && node < n))
      throw fault('Cells connectivity', `names point ${node}`, `points are 0 to ${n - 1}`);
    cells[i] = node;
  }
  return { nodesPerCell, cells };
}

/** How each type of number is read from bytes. */
const READERS: Readonly<
  Record<string, readonly [bytes: number, read: (view: DataView, at: number, little: boolean) => number]>
> = {
  Float32: [4, (view, at, little) => view.getFloat32(at, little)],
  Float64: [8, (view, at, little) => view.getFloat64(at, little)],
  Int8: [1, (view, at) => view.getInt8(at)],
  UInt8: [1, (view, at) => view.getUint8(at)],
  Int16: [2, (view, at, little) => view.getInt16(at, little)],
  UInt16: [2, (view, at, little) => view.getUint16(at, little)],
  Int32: [4, (view, at, little) => view.getInt32(at, little)],
  UInt32: [4, (view, at, little) => view.getUint32(at, little)],
  Int64: [8, (view, at, little) => Number(view.getBigInt64(at, little))],
  UInt64: [8, (view, at, little) => Number(view.getBigUint64(at, little))],
};

function readArray(element: Element, format: Format, key: string): VtuArray {
  const components = Number(element['@NumberOfComponents'] ?? 1);
  if (!(Number.isInteger(components) && components >= 1 && components <= 1000))
    throw fault(key, 'has a bad NumberOfComponents', 'give a whole number');
  const type = String(element['@type']);
  const reader = Object.hasOwn(READERS, type) ? READERS[type] : undefined;
  if (reader === undefined)
    throw fault(
      key,
      `is of type ${showText(String(element['@type']))}`,
      `give one of ${Object.keys(READERS).join(', ')}`,
    );
  const text = String(element['#text'] ?? '').trim();
  switch (element['@format']) {
    case 'ascii':
      return { components, values: readAscii(text, key) };
    case 'binary':
      return { components, values: readBinary(text, reader, format, key) };
    default:
      throw fault(
        key,
        `has format ${showText(String(element['@format']))}`,
        'write arrays as ascii, or binary in place',
      );
  }
}

function readAscii(text: string, key: string): Float64Array {
  const values = text === '' ? new Float64Array(0) : Float64Array.from(text.split(/\s+/), Number);
  if (values.some(Number.isNaN) && !/nan/i.test(text))
    throw fault(key, 'holds what is not a number', 'give numbers apart by blanks');
  return values;
}

function readBinary(text: string, [size, read]: (typeof READERS)[string], format: Format, key: string): Float64Array {
  const compact = text.replace(/\s+/g, '');
  if (!/^[A-Za-z0-9+/]*={0,2}$/.test(compact)) throw fault(key, 'is not base64', 'write it again');
  const bytes = decodeBase64(compact);
  const view = new DataView(bytes.buffer);
  const { headerBytes, littleEndian } = format;
  const told =
    bytes.length < headerBytes
      ? -1
      : headerBytes === 8
        ? Number(view.getBigUint64(0, littleEndian))
        : view.getUint32(0, littleEndian);
  if (told !== bytes.length - headerBytes || told % size !== 0)
    throw fault(key, 'is cut off, or of another length than it says', 'write it again');
  return Float64Array.from({ length: told / size }, (_, i) => read(view, headerBytes + i * size, littleEndian));
}

/** Texts are kept as the numbers of their UTF-8 bytes, each ended by a 0. */
function textsOf(holder: unknown): Map<string, readonly string[]> {
  const texts = new Map<string, readonly string[]>();
  for (const element of dataArrays(holder)) {
    if (element['@type'] !== 'String' || element['@format'] !== 'ascii') continue;
    const bytes = readAscii(String(element['#text'] ?? '').trim(), 'FieldData');
    const list: string[] = [];
    let escaped = '';
    for (const byte of bytes) {
      if (byte === 0) {
        list.push(fromUtf8(escaped));
        escaped = '';
      } else escaped += `%${(byte & 255).toString(16).padStart(2, '0')}`;
    }
    texts.set(String(element['@Name']), list);
  }
  return texts;
}

function fromUtf8(escaped: string): string {
  try {
    return decodeURIComponent(escaped);
  } catch {
    throw fault('FieldData', 'holds a text that is not UTF-8', 'write it as UTF-8');
  }
}
