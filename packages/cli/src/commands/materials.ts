import { InputError } from '@gapwright/fem-core';
import { parseQuantity, showText } from '@gapwright/fem-core/text';
import {
  curveColumns,
  type LibraryMaterial,
  lostAt,
  MATERIAL_GROUPS,
  type Magnet,
  type MagnetAtResult,
  magnetFigures,
  materialFigures,
  nearestNames,
  readMaterials,
  temperatureWarning,
  type Warning,
} from '@gapwright/machine-models';
import { sheetText } from '../datasheet.js';
import { checkOutputFolder } from '../files.js';
import { readInputFile } from '../input.js';
import { materialChart } from '../materials-chart.js';
import { type ListGroup, materialsText } from '../materials-list.js';
import { chartPicture } from '../materials-picture.js';
import { materialSheet } from '../materials-sheet.js';
import { chartLines } from '../materials-terminal.js';
import { type CommonOptions, colourWanted } from '../options.js';
import { type Locate, showWarnings, writeOutputs } from '../outputs.js';
import { resultJson } from '../results-json.js';
import { exitStatus, type Surroundings } from '../surroundings.js';
import { ownVersion } from '../version.js';

export interface MaterialsOptions extends CommonOptions {
  readonly out?: string;
  /** A machine file or section file that describes materials of its own. */
  readonly file?: string;
  /** A quantity, of magnets. */
  readonly temperature?: string;
}

/** `gapwright materials [NAME]`: the library, or one material with its curve. */
export function runMaterials(name: string | undefined, options: MaterialsOptions, surroundings: Surroundings): number {
  refuseStrays(name, options);
  const known = knownMaterials(options);
  return name === undefined ? listAll(known, options, surroundings) : showOne(name, known, options, surroundings);
}

function refuseStrays(name: string | undefined, { temperature, file, set }: MaterialsOptions): void {
  if (name === undefined && temperature !== undefined) {
    throw fault('stray-option', '--temperature', 'goes with one material', 'name a magnet, for example N42');
  }
  if (file === undefined && set.length > 0) {
    throw fault('stray-option', '--set', 'has no file to change', 'name one with --file FILE');
  }
}

/** The library and what a file adds to it or puts in its place. */
interface Known {
  readonly groups: readonly ListGroup[];
  readonly warnings: readonly Warning[];
  readonly locate?: Locate;
  readonly sha256?: string;
}

function knownMaterials({ file, set }: MaterialsOptions): Known {
  if (file === undefined) return { groups: MATERIAL_GROUPS, warnings: [] };
  const { read, sha256 } = readInputFile(file, set, readMaterials);
  const { own, warnings, locate } = read;
  if (Object.keys(own).length === 0) return { groups: MATERIAL_GROUPS, warnings, locate, sha256 };
  return { groups: [{ heading: `Of ${file}`, materials: own }, ...MATERIAL_GROUPS], warnings, locate, sha256 };
}

function listAll(known: Known, options: MaterialsOptions, surroundings: Surroundings): number {
  const json = (): string =>
    resultJson({
      format: 'gapwright-materials/1',
      gapwright: ownVersion(),
      input_sha256: known.sha256,
      materials: known.groups.flatMap(({ heading, materials }) =>
        Object.entries(materials).map(([name, material]) => ({ group: heading, ...materialFigures(name, material) })),
      ),
    });
  const { out } = options;
  if (out !== undefined) checkOutputFolder(out, ['results.json'], options.file ?? '');
  tell(known.warnings, known, options, surroundings);
  const colour = colourWanted(options, surroundings);
  surroundings.stdout.write(options.json ? json() : materialsText(known.groups, colour));
  if (out !== undefined) writeOutputs(out, new Map([['results.json', json()]]), options, surroundings);
  return exitStatus.done;
}

function showOne(name: string, known: Known, options: MaterialsOptions, surroundings: Surroundings): number {
  const { group, material } = findNamed(name, known);
  const asked = askedTemperature(material, options);
  const warnings = [...known.warnings, ...temperatureWarnings(material, asked)];
  const at = material.kind === 'magnet' ? tabulate(material, asked) : [];
  const figures = materialFigures(name, material);
  const chart = materialChart(material, asked === undefined || asked === 20 ? [20] : [20, asked]);
  const json = (): string =>
    resultJson({
      format: 'gapwright-material/1',
      gapwright: ownVersion(),
      input_sha256: known.sha256,
      group,
      ...figures,
      bh: material.kind === 'steel-curve' ? curveColumns(material.bh) : undefined,
      at: material.kind === 'magnet' ? at : undefined,
      warnings,
    });
  const { out } = options;
  if (out !== undefined) {
    checkOutputFolder(out, ['results.json', ...(chart === undefined ? [] : ['curve.svg'])], options.file ?? '');
  }
  tell(warnings, known, options, surroundings);
  if (options.json) {
    surroundings.stdout.write(json());
  } else {
    const remarks = warnings.map(({ key, text }) => `${key}: ${text}`);
    const sheet = sheetText(materialSheet(figures, group, at, remarks), colourWanted(options, surroundings));
    const curve = chart === undefined ? '' : `\n${chartLines(chart, terminalWidth(surroundings)).join('\n')}\n`;
    surroundings.stdout.write(sheet + curve);
  }
  if (out !== undefined) {
    const files = new Map([['results.json', json()]]);
    if (chart !== undefined)
      files.set('curve.svg', chartPicture(`${name}, ${group[0].toLowerCase()}${group.slice(1)}`, chart));
    writeOutputs(out, files, options, surroundings);
  }
  return exitStatus.done;
}

function tell(
  warnings: readonly Warning[],
  { locate }: Known,
  options: MaterialsOptions,
  surroundings: Surroundings,
): void {
  if (!options.quiet) showWarnings(warnings, options, surroundings, locate);
}

/** A file's own material comes before one of the library. */
function findNamed(name: string, { groups }: Known): { readonly group: string; readonly material: LibraryMaterial } {
  for (const { heading, materials } of groups) {
    if (Object.hasOwn(materials, name)) return { group: heading, material: materials[name] };
  }
  const names = groups.flatMap(({ materials }) => Object.keys(materials));
  const nearest = nearestNames(name, names).map((near) => showText(near));
  const remedy = `the nearest names are ${nearest.join(', ')}; gapwright materials lists all`;
  throw fault('unknown-material', 'NAME', `${showText(name)} is not a known material`, remedy);
}

/** degC; undefined where none is asked for. */
function askedTemperature(material: LibraryMaterial, { temperature }: MaterialsOptions): number | undefined {
  if (temperature === undefined) return undefined;
  const reading = parseQuantity(temperature, 'temperature');
  if ('wrong' in reading) throw fault('bad-quantity', '--temperature', reading.wrong, `${reading.remedy}, as 80degC`);
  const { value } = reading;
  const wrong = wrongTemperature(material, value);
  if (wrong === undefined) return value;
  throw fault('out-of-range', '--temperature', wrong, 'give the temperature the magnets work at, for example 80degC');
}

/** degC: no magnet works there. */
const HOTTEST = 1000;

function wrongTemperature(material: LibraryMaterial, celsius: number): string | undefined {
  if (celsius < -273.15) return 'is below absolute zero';
  if (celsius > HOTTEST) return `is above ${HOTTEST} degC, where no magnet works`;
  const lost = material.kind === 'magnet' ? lostAt(material, celsius) : undefined;
  return lost === undefined ? undefined : `leaves no ${lost} by the material's slope`;
}

function temperatureWarnings(material: LibraryMaterial, asked: number | undefined): readonly Warning[] {
  if (asked === undefined) return [];
  const key = '--temperature';
  if (material.kind !== 'magnet') return [{ key, text: 'not used: figures of magnets alone change with it' }];
  const text = temperatureWarning(material, asked);
  return text === undefined ? [] : [{ key, text }];
}

/** At 20 degC, at the grade's limit and at what is asked for, in rising order. */
function tabulate(magnet: Magnet, asked: number | undefined): readonly MagnetAtResult[] {
  const wanted = [20, magnet.highestTemperature, asked].filter((celsius) => celsius !== undefined);
  return [...new Set(wanted)]
    .filter((celsius) => lostAt(magnet, celsius) === undefined)
    .sort((a, b) => a - b)
    .map((celsius) => magnetFigures(magnet, celsius));
}

/** As the terminal says, or COLUMNS; otherwise 100, as wide as the sheets. */
function terminalWidth({ stdout, env }: Surroundings): number {
  const told = stdout.columns ?? Number(env.COLUMNS);
  return Number.isInteger(told) && told > 0 ? told : 100;
}

function fault(code: string, key: string, wrong: string, remedy: string): InputError {
  return new InputError([{ code, key, wrong, remedy }]);
}
