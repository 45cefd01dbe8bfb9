import fc from 'fast-check';
import { SCRAPS } from './scraps.js';

/**
 * Random section files: every kind of shape, material, magnetisation, source, edge and probe, in mixed units. They read
 * without a fault; what only the drawing shows may still be refused, such as a region that lies outside.
 */

const unit = (min: number, max: number): fc.Arbitrary<number> => fc.double({ min, max, noNaN: true });
const pick = <T>(...values: readonly T[]): fc.Arbitrary<T> => fc.constantFrom(...values);

const METRES = { m: 1, mm: 1e-3, cm: 1e-2, um: 1e-6, in: 0.0254, mil: 25.4e-6, ft: 0.3048 } as const;
type LengthUnit = keyof typeof METRES;

/** Writes lengths given in shares of the section's size. */
export interface Pen {
  /** m */
  readonly size: number;
  readonly units: readonly LengthUnit[];
}

/** A length in shares of the section, in one of the pen's units by turns of its own digits: the same pen, the same text. */
function length(pen: Pen, share: number): string {
  const turn = Math.abs(Math.round(share * 7919)) % pen.units.length;
  const name = pen.units[turn];
  return `${Number(((share * pen.size) / METRES[name]).toPrecision(9))}${turn % 2 === 0 ? ' ' : ''}${name}`;
}

type Pair = readonly [x: number, y: number];
const place = (pen: Pen, [x, y]: Pair): string => `[${length(pen, x)}, ${length(pen, y)}]`;

type Drawn =
  | { readonly kind: 'rectangle'; readonly from: Pair; readonly to: Pair }
  | { readonly kind: 'polygon'; readonly corners: readonly Pair[] }
  | { readonly kind: 'circle'; readonly centre: Pair; readonly radius: number };

function drawn(pen: Pen, shape: Drawn): string {
  switch (shape.kind) {
    case 'rectangle':
      return `{ rectangle: { from: ${place(pen, shape.from)}, to: ${place(pen, shape.to)} } }`;
    case 'polygon':
      return `{ polygon: [${shape.corners.map((corner) => place(pen, corner)).join(', ')}] }`;
    case 'circle':
      return `{ circle: { centre: ${place(pen, shape.centre)}, radius: ${length(pen, shape.radius)} } }`;
  }
}

const pairs: fc.Arbitrary<Pair> = fc.tuple(unit(0.05, 0.95), unit(0.05, 0.95));

const rectangles = fc
  .tuple(pairs, unit(0.02, 0.5), unit(0.02, 0.5))
  .map(([[x, y], w, h]): Drawn => ({ kind: 'rectangle', from: [x, y], to: [x + w, y + h] }));
const circles = fc.tuple(pairs, unit(0.02, 0.3)).map(([centre, radius]): Drawn => ({ kind: 'circle', centre, radius }));
/** Corners on a star round a middle point, so that no two sides cross. */
const polygons = fc.tuple(pairs, fc.array(unit(0.02, 0.3), { minLength: 3, maxLength: 9 }), unit(0, 6)).map(
  ([[x, y], reaches, turn]): Drawn => ({
    kind: 'polygon',
    corners: reaches.map((reach, i): Pair => {
      const angle = turn + (2 * Math.PI * i) / reaches.length;
      return [x + reach * Math.cos(angle), y + reach * Math.sin(angle)];
    }),
  }),
);
const shapes = fc.oneof(rectangles, circles, polygons);

const MATERIALS = `materials:
  plate: { kind: steel, mu_r: 2000 }
  pack: { kind: steel, mu_r: 4000, stacking_factor: 0.95 }
  soft: { kind: steel, bh: [[0, 0], [80, 0.2], [160, 0.6], [280, 0.95], [480, 1.2], [900, 1.4], [2000, 1.55], [5000, 1.68], [30000, 1.98]] }
  sheets: { kind: steel, stacking_factor: 90 %, bh: [[50, 0.4], [200, 1.1], [1000, 1.5], [10000, 1.8], [100000, 2.2]] }
  block: { kind: magnet, remanence: 1.2 T, recoil: 1.05 }
  knee: { kind: magnet, recoil: 1.05, demagnetisation: [[0, 0.4], [-220e3, 0.11], [-260e3, -0.15], [-290e3, -0.6]] }
  brass: { kind: nonmagnetic, density: 8500 kg/m3 }
`;
const MAGNETS = ['block', 'knee', 'N42'] as const;
const STEELS = ['plate', 'pack', 'soft', 'sheets', 'AISI 1008'] as const;

const magnetised: fc.Arbitrary<(pen: Pen) => string> = fc.oneof(
  fc.integer({ min: -400, max: 400 }).map((angle) => () => `${angle} deg`),
  unit(-7, 7).map((angle) => () => `${angle.toFixed(3)} rad`),
  fc.tuple(pick('inward', 'outward'), pairs).map(
    ([radial, at]) =>
      (pen: Pen) =>
        `{ radial: ${radial}, centre: ${place(pen, at)} }`,
  ),
  fc.tuple(fc.integer({ min: -5, max: 5 }), pairs).map(
    ([turning, at]) =>
      (pen: Pen) =>
        `{ turning: ${turning}, angle: 30 deg, centre: ${place(pen, at)} }`,
  ),
  fc.tuple(unit(0.1, 1), pick('clockwise', 'anticlockwise')).map(
    ([wave, sense]) =>
      (pen: Pen) =>
        `{ wavelength: ${length(pen, wave)}, along: 0 deg, angle: 90 deg, sense: ${sense} }`,
  ),
);

const sources = fc.oneof(
  fc.constant(''),
  fc
    .tuple(fc.integer({ min: -300, max: 300 }), unit(-20, 20))
    .map(([turns, current]) => `, turns: ${turns || 1}, current: ${current.toFixed(2)} A`),
  unit(-5, 5).map((density) => `, current_density: ${density.toFixed(2)} A/mm2`),
);

const fillings: fc.Arbitrary<(pen: Pen) => string> = fc.oneof(
  pick(...STEELS).map((name) => () => `material: ${name}`),
  fc.tuple(pick('copper', 'brass', 'air'), sources).map(
    ([name, source]) =>
      () =>
        `material: ${name}${source}`,
  ),
  fc.tuple(pick(...MAGNETS), magnetised).map(
    ([name, direction]) =>
      (pen: Pen) =>
        `material: ${name}, magnetised: ${direction(pen)}`,
  ),
);

const applied = fc
  .tuple(unit(-2, 2), unit(-2, 2))
  .map(([x, y]) => `condition: applied, field: [${x.toFixed(2)} T, ${(1000 * y).toFixed(1)} mT]`);
const bound = fc.oneof(pick('condition: closed', 'condition: crossing'), applied);

/** An outline with conditions of its sides that do not contradict the kind of outline. */
interface Frame {
  readonly outline: Drawn;
  readonly edges: readonly string[];
  readonly open: boolean;
}

const alone = fc.oneof(
  fc.constant({ edges: [], open: false }),
  fc.constant({ edges: ['{ side: all, condition: open }'], open: true }),
  bound.map((one) => ({ edges: [`{ side: all, ${one} }`], open: false })),
);
const square = fc.oneof(
  alone,
  fc
    .subarray(['left', 'right', 'top', 'bottom'], { minLength: 1 })
    .chain((sides) => bound.map((one) => ({ edges: [`{ side: [${sides.join(', ')}], ${one} }`], open: false }))),
  fc
    .tuple(pick('repeating', 'reversing'), pick('closed', 'crossing', 'repeating', 'reversing'))
    .map(([across, along]) => ({
      edges: [
        `{ side: [left, right], condition: ${across} }`,
        along === 'closed' || along === 'crossing'
          ? `{ side: [top, bottom], condition: ${along} }`
          : `{ side: [[bottom], [top]], condition: ${along} }`,
      ],
      open: false,
    })),
);
const sheared = fc.oneof(
  alone,
  pick('repeating', 'reversing').map((kind) => ({
    edges: [`{ side: [edge 2, edge 4], condition: ${kind} }`],
    open: false,
  })),
  bound.map((one) => ({ edges: [`{ side: edge 3, ${one} }`, '{ side: edge 1, condition: crossing }'], open: false })),
);

const SQUARE: Drawn = { kind: 'rectangle', from: [0, 0], to: [1, 1] };
const ROUND: Drawn = { kind: 'circle', centre: [0.5, 0.5], radius: 0.7 };
const SHEARED: Drawn = {
  kind: 'polygon',
  corners: [
    [0, 0],
    [1, 0],
    [1.2, 1],
    [0.2, 1],
  ],
};

const frames: fc.Arbitrary<Frame> = fc.oneof(
  square.map((binding) => ({ outline: SQUARE, ...binding })),
  square.map((binding) => ({ outline: SQUARE, ...binding })),
  alone.map((binding) => ({ outline: ROUND, ...binding })),
  sheared.map((binding) => ({ outline: SHEARED, ...binding })),
);

/** A probe of a section of `count` regions, named r0, r1, ... */
const probes: fc.Arbitrary<(pen: Pen, count: number) => string> = fc.oneof(
  pairs.map((at) => (pen: Pen) => `point: ${place(pen, at)}`),
  fc.tuple(pairs, pairs, fc.integer({ min: 2, max: 40 })).map(
    ([from, to, points]) =>
      (pen: Pen) =>
        `line: { from: ${place(pen, from)}, to: ${place(pen, to)}, points: ${points} }`,
  ),
  fc.nat(20).map((r) => (_: Pen, count: number) => `force_on: r${r % count}`),
  fc.tuple(fc.nat(20), fc.nat(20), pairs).map(
    ([q, r, about]) =>
      (pen: Pen, count: number) =>
        `force_on: [r${q % count}, r${r % count}], about: ${place(pen, about)}`,
  ),
  fc.nat(20).map((r) => (_: Pen, count: number) => `linkage_of: r${r % count}`),
  fc.tuple(pairs, pairs).map(
    ([from, to]) =>
      (pen: Pen) =>
        `flux_through: { from: ${place(pen, from)}, to: ${place(pen, to)} }`,
  ),
  fc.nat(20).map((r) => (_: Pen, count: number) => `mean_over: r${r % count}`),
);

const pens: fc.Arbitrary<Pen> = fc.record({
  size: pick(0.1, 0.1, 0.02, 1.5, 1e-6, 1e4),
  units: pick<readonly LengthUnit[]>(['mm'], ['mm', 'm'], ['in', 'mil', 'mm'], ['um', 'cm', 'ft', 'm']),
});

/** Text of a section file, one entry a line. */
export const sectionFiles: fc.Arbitrary<string> = fc
  .record({
    pen: pens,
    frame: frames,
    regions: fc.array(fc.tuple(shapes, fillings, fc.option(unit(0.03, 0.2), { freq: 4 })), {
      minLength: 1,
      maxLength: 5,
    }),
    probes: fc.array(probes, { maxLength: 4 }),
    background: pick('air', 'air', 'air', 'plate', 'soft'),
    accuracy: pick('5 %', '10 %', '20 %', '0.05'),
    meshes: fc.integer({ min: 1, max: 3 }),
    near: fc.option(pairs, { freq: 4 }),
  })
  .map(({ pen, frame, regions, probes: asked, background, accuracy, meshes, near }) => {
    const entries = (head: string, lines: readonly string[]): string =>
      lines.length === 0 ? '' : `${head}:\n${lines.map((line) => `  - ${line}\n`).join('')}`;
    return [
      'format: gapwright-section/1\nname: Drawn at random\ndepth: 40 mm\n',
      MATERIALS,
      `outline: ${drawn(pen, frame.outline)}\nbackground: ${frame.open ? 'air' : background}\n`,
      entries(
        'regions',
        regions.map(([shape, filling, edge], i) => {
          const size = edge === null ? '' : `, max_edge: ${length(pen, edge)}`;
          return `{ name: r${i}, ${filling(pen)}, shape: ${drawn(pen, shape)}${size} }`;
        }),
      ),
      entries('edges', frame.edges),
      near === null ? '' : entries('size_at', [`{ point: ${place(pen, near)}, max_edge: ${length(pen, 0.04)} }`]),
      entries(
        'probes',
        asked.map((probe, i) => `{ name: p${i}, ${probe(pen, regions.length)} }`),
      ),
      `model: { accuracy: ${accuracy}, max_meshes: ${meshes}, max_triangles: 3000 }\n`,
    ].join('');
  });

const VALUES = [
  ...['NaN', '.nan', '.inf', '-.inf', 'inf', '1e999', '-1e999', '1e308', '-1', '0', '-0', '1e-320', '0x10', '1_000'],
  ...['0 mm', '-5 mm', '1e-9 m', '1e9 m', '1e10 m', '1e300 m', '1e-300 m', 'NaN mm', '12', '12 kg', '1e999 mm', ' mm'],
  ...['', '~', 'null', 'true', 'on', '[]', '{}', '[[]]', '[[1 mm, 2 mm]]', '{ a: 1 }', '"<script>"', '"\\u0007"'],
  ...['r0', 'r1', 'air', 'N42', 'soft', 'none', 'all', 'left', '[left, right]', '[[left], [right, top]]', 'edge 1'],
  ...['rim', 'open', 'repeating', 'reversing', 'crossing', 'applied', '[0 T, 1 T]', '[1e300 T, 0 T]', '1e9 A'],
  ...['1000000', '999999999999', '2.5', '1e-15', '100 %', '0 %', '90 deg', '1e30 deg', '"(outside)"', '"(beyond)"'],
  ...['{ circle: { centre: [0 mm, 0 mm], radius: 5 mm } }', '[[0, 0], [100, 1], [50, 0.5]]', '&x 5 mm', '*x'],
  '['.repeat(50),
  'x'.repeat(20_000),
  `"${'\u{1f9f2}'.repeat(3000)}"`,
];

const KEYS = [
  ...['name', 'material', 'shape', 'turns', 'current', 'current_density', 'magnetised', 'side', 'condition', 'field'],
  ...['rectangle', 'polygon', 'circle', 'from', 'to', 'centre', 'radius', 'point', 'line', 'force_on', 'mean_over'],
  ...['max_edge', 'depth', 'outline', 'background', 'regions', 'edges', 'probes', 'model', 'mu_r', 'bh', '__proto__'],
];

/** A value of the language as it stands in the files above: a number with its unit, or a word. */
const VALUE = /-?\d[\d.e+-]* ?[A-Za-z%]?[A-Za-z/\d]*|(?<=: )[A-Za-z]\w*/g;
const KEY = /\w+(?=:)/g;

/** Changes a text; what there is nothing of is left alone. */
type Change = (text: string) => string;

function replaceOne(text: string, pattern: RegExp, which: number, by: (old: string) => string): string {
  const found = [...text.matchAll(pattern)];
  if (found.length === 0) return text;
  const { index, 0: old } = found[which % found.length];
  return text.slice(0, index) + by(old) + text.slice(index + old.length);
}

function onLines(text: string, change: (lines: string[]) => void): string {
  const lines = text.split('\n');
  change(lines);
  return lines.join('\n');
}

const nat = fc.nat(100_000);

const changes: fc.Arbitrary<Change> = fc.oneof(
  // Bytes.
  fc
    .tuple(
      nat,
      fc.oneof(fc.constant(0), fc.nat(12), fc.nat(200)),
      fc.oneof(pick(...SCRAPS), fc.string({ unit: 'binary', maxLength: 6 })),
    )
    .map(
      ([at, cut, scrap]): Change =>
        (text) => {
          const start = at % (text.length + 1);
          return text.slice(0, start) + scrap + text.slice(start + cut);
        },
    ),
  // Values, in place of others.
  {
    weight: 4,
    arbitrary: fc.tuple(nat, pick(...VALUES)).map(
      ([which, value]): Change =>
        (text) =>
          replaceOne(text, VALUE, which, () => value),
    ),
  },
  fc.tuple(nat, nat).map(
    ([which, other]): Change =>
      (text) => {
        const all = text.match(VALUE) ?? [''];
        return replaceOne(text, VALUE, which, () => all[other % all.length]);
      },
  ),
  fc.tuple(nat, pick('-', '1e9', '0.', '1', '.', '&k ', '!!str ')).map(
    ([which, head]): Change =>
      (text) =>
        replaceOne(text, VALUE, which, (old) => head + old),
  ),
  fc.tuple(nat, pick(...KEYS)).map(
    ([which, key]): Change =>
      (text) =>
        replaceOne(text, KEY, which, () => key),
  ),
  // Whole lines.
  nat.map(
    (at): Change =>
      (text) =>
        onLines(text, (lines) => lines.splice(at % lines.length, 1)),
  ),
  nat.map(
    (at): Change =>
      (text) =>
        onLines(text, (lines) => lines.splice(at % lines.length, 0, lines[at % lines.length])),
  ),
  fc.tuple(nat, nat).map(
    ([p, q]): Change =>
      (text) =>
        onLines(text, (lines) => {
          const [i, j] = [p % lines.length, q % lines.length];
          [lines[i], lines[j]] = [lines[j], lines[i]];
        }),
  ),
  // The whole text.
  pick<Change>(
    (text) => `\ufeff${text}`,
    (text) => text.replaceAll('\n', '\r\n'),
    (text) => text.replaceAll('\n', '\r'),
    (text) => `${text}---\n${text}`,
    (text) => text.replaceAll(' ', '\t'),
    () => '',
    () => '~\n',
    () => '[]\n',
    (text) => `- ${text}`,
    (text) => text.replaceAll('r0', '"<b>r0</b>\\u0000\\u001b"'),
    (text) => text.replaceAll('r0', 'r1'),
    (text) => text.replaceAll('r0', '__proto__').replaceAll('r1', 'constructor'),
    (text) => text.replaceAll('r0', 'background').replaceAll('r1', 'air'),
    (text) => text.replaceAll('r0', '"a.b.shape"').replaceAll('r1', '"a.b"'),
    (text) => text.replaceAll('r0', 'n'.repeat(5000)),
  ),
  nat.map(
    (at): Change =>
      (text) =>
        text.slice(0, at % (text.length + 1)),
  ),
);

/** Section files with a few things changed that no author would change on purpose. */
export const brokenSectionFiles: fc.Arbitrary<string> = fc
  .tuple(sectionFiles, fc.array(changes, { minLength: 1, maxLength: 3 }))
  .map(([text, list]) => list.reduce((before, change) => change(before), text));

/** Numbers a little or far off, the other way round, or those of another place: what still reads without a fault. */
const oddities: fc.Arbitrary<Change> = fc.oneof(
  fc.tuple(nat, fc.integer({ min: -9, max: 9 })).map(
    ([which, power]): Change =>
      (text) =>
        replaceOne(text, NUMBER, which, (old) => String(Number((Number(old) * 10 ** power).toPrecision(6)))),
  ),
  fc.tuple(nat, nat).map(
    ([which, other]): Change =>
      (text) => {
        const all = text.match(LENGTH) ?? [''];
        return replaceOne(text, LENGTH, which, () => all[other % all.length]);
      },
  ),
  fc.tuple(nat, unit(-1e-6, 1e-6)).map(
    ([which, share]): Change =>
      (text) =>
        replaceOne(text, NUMBER, which, (old) => String(Number(old) * (1 + share))),
  ),
  nat.map(
    (which): Change =>
      (text) =>
        replaceOne(text, NUMBER, which, (old) => `${-Number(old)}`),
  ),
  // A region once more, on top of the others.
  fc.tuple(nat, pick('again', 'air ', '__proto__', 'toString', 'a.b', 'r0, r1')).map(
    ([which, name]): Change =>
      (text) => {
        const lines = text.match(/^ {2}- \{ name: r.*\n/gm) ?? [''];
        const line = lines[which % lines.length];
        return text.replace(line, () => line + line.replace(/name: \w+/, () => `name: '${name}'`));
      },
  ),
);

const NUMBER = /-?\d[\d.]*(?:e[+-]?\d+)?(?= ?[a-zA-Z%,\]}])/g;
const LENGTH = /-?\d[\d.]*(?:e[+-]?\d+)? ?(?:mm|cm|um|in|mil|ft|m)\b/g;

/** Section files that keep to the language and ask for odd things. */
export const oddSectionFiles: fc.Arbitrary<string> = fc
  .tuple(sectionFiles, fc.array(oddities, { minLength: 1, maxLength: 3 }))
  .map(([text, list]) => list.reduce((before, change) => change(before), text));
