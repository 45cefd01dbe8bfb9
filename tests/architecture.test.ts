import { describe, expect, test } from 'vitest';
import type { SourceFile, SourcePackage } from './helpers/source-graph.js';
import { isRelative, readPackage, readSource, targetOf, topLevelEntries } from './helpers/source-graph.js';

/** Rooms from the ground up; a room imports only from floors below its own. The last floor is the roof. */
type Floors = readonly (readonly string[])[];

const femCore = readPackage('fem-core');
const machineModels = readPackage('machine-models');
const cli = readPackage('cli');
const packages = [femCore, machineModels, cli];

const houses: readonly (readonly [SourcePackage, Floors])[] = [
  [
    femCore,
    [
      ['base'],
      ['kernels'],
      ['geometry', 'materials', 'sparse'],
      ['mesh'],
      ['elements'],
      ['assembly'],
      ['solve'],
      ['field'],
      ['estimate'],
      ['io'],
      ['pipeline.ts'],
      ['probes'],
      ['verify'],
      ['entries', 'index.ts'],
    ],
  ],
  [
    machineModels,
    [
      ['machine.ts'],
      ['costs', 'materials', 'rotor', 'waves', 'winding'],
      ['input', 'slices', 'end-effect', 'faults', 'thermal'],
      ['inductance', 'losses', 'mechanics', 'load', 'winding-chooser'],
      ['demagnetisation'],
      ['results', 'section-file'],
      ['solve-machine.ts'],
      ['index.ts'],
    ],
  ],
  [
    cli,
    [
      [
        'engine.ts',
        'figures.ts',
        'files.ts',
        'fused-products.ts',
        'lines-csv.ts',
        'magnitude.ts',
        'near-part.ts',
        'nought.ts',
        'plain-text.ts',
        'results-json.ts',
        'sheet-parts.ts',
        'surroundings.ts',
        'version.ts',
        'waveforms-csv.ts',
      ],
      [
        'input.ts',
        'materials-chart.ts',
        'materials-list.ts',
        'options.ts',
        'section-engine.ts',
        'service-sheet.ts',
        'solve-machine.ts',
      ],
      ['sheet.ts'],
      [
        'datasheet.ts',
        'materials-picture.ts',
        'materials-sheet.ts',
        'materials-terminal.ts',
        'outputs.ts',
        'report',
        'section-sheet.ts',
      ],
      ['commands'],
      ['main.ts'],
      ['bin.ts'],
    ],
  ],
];

/** `mesh/refine.ts` lives in the room `mesh`, `pipeline.ts` in the room of its name. */
const roomOf = (path: string): string => path.split('/')[0];

function floorFaults(files: readonly SourceFile[], floors: Floors): string[] {
  const floorOf = (path: string): number => floors.findIndex((rooms) => rooms.includes(roomOf(path)));
  const faults: string[] = [];
  for (const file of files) {
    if (floorOf(file.path) < 0) faults.push(`${file.path} has no floor`);
    for (const module of file.imports.filter(isRelative)) {
      const target = targetOf(file, module);
      if (roomOf(target) === roomOf(file.path) || floorOf(target) < 0) continue; // a target without a floor tells for itself
      if (floorOf(target) >= floorOf(file.path)) faults.push(`${file.path} -> ${target}`);
    }
  }
  return faults;
}

/** Rooms that are named but hold nothing: the rule would be idle there. */
function emptyRooms(files: readonly SourceFile[], floors: Floors): string[] {
  return floors.flat().filter((room) => !files.some((file) => roomOf(file.path) === room));
}

/** Packages each may use, by public name only. */
const below: Readonly<Record<string, readonly string[]>> = {
  '@gapwright/fem-core': [],
  '@gapwright/machine-models': ['@gapwright/fem-core'],
  '@gapwright/cli': ['@gapwright/machine-models', '@gapwright/fem-core'],
};

function packageFaults({ name, dependencies, files }: SourcePackage, mayUseNode: boolean): string[] {
  const faults: string[] = [];
  for (const file of files) {
    for (const module of file.imports) {
      const tell = (why: string): number => faults.push(`${file.path} -> ${module}: ${why}`);
      if (isRelative(module)) {
        if (targetOf(file, module).startsWith('..')) tell('leaves its package');
        continue;
      }
      if (module.startsWith('node:')) {
        if (!mayUseNode) tell('must run in browsers');
        continue;
      }
      const owner = module
        .split('/')
        .slice(0, module.startsWith('@') ? 2 : 1)
        .join('/');
      if (!dependencies.includes(owner)) tell('not among its dependencies'); // 'fs' and 'path' without the prefix too
      if (!owner.startsWith('@gapwright/')) continue;
      if (!packages.some(({ publicNames }) => publicNames.includes(module))) tell('not a public name');
      if (!below[name].includes(owner)) tell('not below');
    }
  }
  return faults;
}

/** Globals of Node and of browsers that no browser-and-Node library may lean on. */
const PLATFORM = [
  'process',
  'Buffer',
  'global',
  'require',
  'document',
  'window',
  'navigator',
  'console',
  'performance',
];

const globalFaults = (files: readonly SourceFile[], forbidden: readonly string[]): string[] =>
  files.flatMap((file) =>
    file.globals.filter((name) => forbidden.includes(name)).map((name) => `${file.path}: ${name}`),
  );

/** A path that comes back to its start, for each file that closes one (depth-first, colours). */
function circles(files: readonly SourceFile[]): string[] {
  const byPath = new Map(files.map((file) => [file.path, file]));
  const state = new Map<string, 'open' | 'done'>();
  const found: string[] = [];
  const walk = (path: string, trail: readonly string[]): void => {
    if (state.get(path) === 'done') return;
    if (state.get(path) === 'open') {
      found.push([...trail.slice(trail.indexOf(path)), path].join(' -> '));
      return;
    }
    state.set(path, 'open');
    const file = byPath.get(path);
    for (const module of file?.imports.filter(isRelative) ?? []) {
      if (file !== undefined) walk(targetOf(file, module), [...trail, path]);
    }
    state.set(path, 'done');
  };
  for (const { path } of files) walk(path, []);
  return found;
}

const CARD = [
  'packages',
  'tests',
  'benchmarks',
  'package.json',
  'package-lock.json',
  'tsconfig.base.json',
  'README.md',
  'DEVELOPERS.md',
  'LICENSE',
];
const strangers = (entries: readonly string[]): string[] => [
  ...new Set(entries.filter((entry) => !entry.startsWith('.') && !CARD.includes(entry))),
];

describe.each(houses)('$name', (house, floors) => {
  test('each room imports only from floors below it', () => {
    expect(floorFaults(house.files, floors)).toEqual([]);
    expect(emptyRooms(house.files, floors)).toEqual([]);
  });

  test('no import goes round in a circle', () => {
    expect(circles(house.files)).toEqual([]);
  });

  test('every relative import names a file that exists', () => {
    const known = new Set(house.files.map((file) => file.path));
    const lost = house.files.flatMap((file) =>
      file.imports.filter((module) => isRelative(module) && !known.has(targetOf(file, module))),
    );
    expect(lost).toEqual([]);
  });
});

test('packages point one way and use each other by public name', () => {
  expect(packages.flatMap((one) => packageFaults(one, one === cli))).toEqual([]);
});

test('fem-core and machine-models use nothing of the platform they run on', () => {
  expect([femCore, machineModels].flatMap(({ files }) => globalFaults(files, PLATFORM))).toEqual([]);
});

test('only bin.ts of the command touches the process, and what must be set up before it', () => {
  const found = globalFaults(cli.files, ['process', 'console']);
  expect(found).toEqual(['bin.ts: process', 'fused-products.ts: process']);
  const byImport = cli.files.filter((file) => file.imports.some((module) => /^(node:)?process$/.test(module)));
  expect(byImport).toEqual([]);
});

test('the top level of the repository is that of the card', () => {
  const entries = topLevelEntries();
  expect(entries).toContain('packages');
  expect(strangers(entries)).toEqual([]);
});

describe('planted violations are caught', () => {
  const file = (path: string, ...imports: string[]): SourceFile => ({ path, imports, globals: [] });
  const floors: Floors = [['base'], ['left', 'right'], ['roof.ts']];
  const plant = (name: string, ...files: SourceFile[]): SourcePackage => ({
    name,
    publicNames: [name],
    dependencies: ['yaml', '@gapwright/fem-core', '@gapwright/machine-models'],
    files,
  });

  test('an import that climbs, one across a floor, one of the roof, and a room without a floor', () => {
    expect(floorFaults([file('base/a.ts', '../left/b.js', './c.js')], floors)).toEqual(['base/a.ts -> left/b.ts']);
    expect(floorFaults([file('left/b.ts', '../right/c.js')], floors)).toEqual(['left/b.ts -> right/c.ts']);
    expect(floorFaults([file('right/c.ts', '../roof.js')], floors)).toEqual(['right/c.ts -> roof.ts']);
    expect(floorFaults([file('shed/d.ts')], floors)).toEqual(['shed/d.ts has no floor']);
    expect(floorFaults([file('right/c.ts', '../base/a.js', 'yaml')], floors)).toEqual([]);
    expect(emptyRooms([file('base/a.ts'), file('right/c.ts'), file('roof.ts')], floors)).toEqual(['left']);
  });

  test('circles of one, two and three files; a diamond is none', () => {
    expect(circles([file('a.ts', './a.js')])).toEqual(['a.ts -> a.ts']);
    expect(circles([file('a.ts', './b.js'), file('b.ts', './a.js')])).toEqual(['a.ts -> b.ts -> a.ts']);
    const three = [
      file('x.ts', './m/a.js'),
      file('m/a.ts', './b.js'),
      file('m/b.ts', './c.js'),
      file('m/c.ts', './a.js'),
    ];
    expect(circles(three)).toEqual(['m/a.ts -> m/b.ts -> m/c.ts -> m/a.ts']);
    const diamond = [file('a.ts', './b.js', './c.js'), file('b.ts', './d.js'), file('c.ts', './d.js'), file('d.ts')];
    expect(circles(diamond)).toEqual([]);
  });

  test.each([
    ['@gapwright/fem-core', 'io/a.ts', 'node:fs', 'must run in browsers'],
    ['@gapwright/fem-core', 'io/a.ts', 'fs', 'not among its dependencies'],
    ['@gapwright/fem-core', 'io/a.ts', 'zod', 'not among its dependencies'],
    ['@gapwright/fem-core', 'io/a.ts', '@gapwright/machine-models', 'not below'],
    ['@gapwright/machine-models', 'a.ts', '@gapwright/fem-core/src/mesh/mesh.js', 'not a public name'],
    ['@gapwright/machine-models', 'input/a.ts', '../../../fem-core/src/mesh/mesh.js', 'leaves its package'],
  ])('%s: %s importing %s', (name, path, module, why) => {
    expect(packageFaults(plant(name, file(path, module)), false)).toEqual([`${path} -> ${module}: ${why}`]);
    const allowed = file('a.ts', 'node:fs', 'yaml/util', './b.js', '@gapwright/fem-core', '@gapwright/fem-core/mesh');
    expect(packageFaults(plant('@gapwright/cli', allowed), true)).toEqual([]);
  });

  test('every way to write an import is read, and no comment or string is', () => {
    const text = `
      import a from './a.js'; import type { B } from './b.js'; import './c.js'; export * from './d.js';
      export type { E } from './e.js'; type F = import('./f.js').F; const g = await import('./g.js');
      // import './never.js'
      const text = "import './never.js'";`;
    expect(readSource('x.ts', text).imports).toEqual(['a', 'b', 'c', 'd', 'e', 'f', 'g'].map((name) => `./${name}.js`));
  });

  test('a global is told from a property, a key, a parameter and a name of the file', () => {
    const mine = 'const window = 1; f(window); function g(document: number) { return document + x.process; }';
    const keys = 'const o = { console: 1 }; const { performance: p } = o; interface I { process: number }';
    expect(globalFaults([readSource('x.ts', `${mine} ${keys}`)], PLATFORM)).toEqual([]);
    const platform = 'console.log(process.env, performance.now()); type T = typeof document; const o = { window };';
    const found = globalFaults([readSource('y.ts', platform)], PLATFORM);
    expect(found.sort()).toEqual(['console', 'document', 'performance', 'process', 'window'].map((n) => `y.ts: ${n}`));
  });

  test('a stranger at the top level', () => {
    expect(strangers(['packages', '.gitignore', 'notes.txt', 'scripts', 'scripts', 'LICENSE'])).toEqual([
      'notes.txt',
      'scripts',
    ]);
  });
});
