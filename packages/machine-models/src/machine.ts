/**
 * A machine in SI units, as the models work with it: lengths in metres, angles in radians, temperatures in degrees
 * Celsius, speeds in revolutions per minute only where the key says so. Built by `readMachine`; every promise of the
 * input checks holds.
 */
export interface Machine {
  readonly name: string;
  /** Library and user materials by name; every material the machine names is here. */
  readonly materials: Readonly<Record<string, LibraryMaterial>>;
  readonly rotor: Rotor;
  readonly winding: Winding;
  readonly operation: Operation;
  readonly limits: Limits;
  readonly prices?: Prices;
  readonly measured?: Measured;
  readonly model: Model;
}

/** What must not be passed. */
export interface Limits {
  /** Highest DC voltage, V. */
  readonly controllerVoltage?: number;
  /** degC. */
  readonly windingTemperature?: number;
}

/** Per kilogram. */
export interface Prices {
  readonly currency: string;
  readonly magnets?: number;
  readonly copper?: number;
  readonly steel?: number;
}

/** What a bench test gave; replaces the computed figure. */
export interface Measured {
  /** e = sum peak_n sin(n theta) at the speed; it scales with speed. */
  readonly phaseEmf?: {
    readonly speedRpm: number;
    readonly order: readonly number[];
    readonly peak: readonly number[];
  };
  /** At the temperature of the winding, ohm. */
  readonly phaseResistance?: number;
  /** Self less mutual, H. */
  readonly phaseInductance?: number;
}

export type LibraryMaterial =
  | { readonly kind: 'nonmagnetic'; readonly density?: number; readonly source: string }
  | { readonly kind: 'steel'; readonly muR: number; readonly density?: number; readonly source: string }
  | {
      readonly kind: 'steel-curve';
      /** Rows [H in A/m, B in T], strictly rising, from [0, 0]. */
      readonly bh: readonly (readonly [H: number, B: number])[];
      readonly density?: number;
      readonly source: string;
    }
  | {
      readonly kind: 'magnet';
      /** At 20 degC, T. */
      readonly remanence: number;
      /** What the grade may have at 20 degC, T; `remanence` is what is taken. */
      readonly remanenceRange?: readonly [lowest: number, highest: number];
      /** Demagnetisation curve at 20 degC where one is given: rows [H in A/m, B in T], one of them [0, remanence]. */
      readonly demagnetisation?: readonly (readonly [H: number, B: number])[];
      readonly recoil: number;
      /** Relative change per kelvin, -0.0012 for -0.12 %/K. */
      readonly remanenceSlope: number;
      /** A/m at 20 degC. */
      readonly coercivityIntrinsic?: number;
      readonly coercivitySlope?: number;
      /** degC: the usual limit of the grade, for magnets in a good circuit; the working point decides. */
      readonly highestTemperature?: number;
      readonly density?: number;
      readonly source: string;
    };

export interface Disc {
  readonly material: string;
  readonly thickness: number;
  readonly innerRadius: number;
  readonly outerRadius: number;
  readonly clampRadius?: number;
}

export interface Rotor {
  /** Even, at least 2. */
  readonly poles: number;
  readonly arrangement: 'twin' | 'keeper';
  /** Magnet face to magnet face (or keeper), m. */
  readonly gap: number;
  /** Undefined when ironless (material: none). */
  readonly disc: Disc | undefined;
  /** The plain disc opposite the magnets; arrangement keeper only. */
  readonly keeper: { readonly material: string; readonly thickness: number } | undefined;
  readonly magnets: Magnets;
  readonly interpoles: Interpoles | undefined;
}

/** Magnets between the main ones, magnetised along the circumference so that the gap gains; as hot as the main ones. */
export interface Interpoles {
  /** `fill`: all the room between the main magnets at each radius; else m, about midway between two poles. */
  readonly width: number | 'fill';
  /** From the magnet face backwards, m. */
  readonly depth: number;
  /** They reach through the disc: what is left of it is a steel plate a pole. */
  readonly through: boolean;
  readonly material: string;
}

export interface MagnetsCommon {
  readonly material: string;
  readonly thickness: number;
  readonly meanRadius: number;
  /** degC. */
  readonly temperature: number;
}
export type Magnets =
  | (MagnetsCommon & { readonly shape: 'block'; readonly width: number; readonly length: number })
  | (MagnetsCommon & {
      readonly shape: 'sector';
      /** Share of the pole pitch, above 0, at most 1; 1 for a Halbach array. */
      readonly arc: number;
      readonly length: number;
      /** Pieces a pole, each turned by 180/segments degrees against the one before, strong side to the gap; 1: plain magnets. */
      readonly segments: number;
    })
  | (MagnetsCommon & { readonly shape: 'round'; readonly diameter: number });

/** The hole of a concentrated coil: a trapezium on the coil's axis, widths straight across. */
export interface Opening {
  readonly innerRadius: number;
  readonly outerRadius: number;
  readonly innerWidth: number;
  readonly outerWidth: number;
}

export interface Wire {
  /** Bare copper section of one strand, m^2. */
  readonly strandArea: number;
  readonly strands: number;
  /** Bare diameter of a round strand, m. */
  readonly diameter?: number;
  /** Sides of a rectangular strand, m. */
  readonly width?: number;
  readonly height?: number;
  readonly enamel?: string;
}

interface WindingCommon {
  readonly phases: 2 | 3 | 5 | 6;
  /** All coils of the machine. */
  readonly coils: number;
  /** Per coil (overlapped: conductors per leg). */
  readonly turns: number;
  /** At right angles to the leg's side, m; where tapered, at the magnets' mean radius. */
  readonly legWidth: number;
  readonly legShape: 'parallel' | 'tapered';
  /** Axial size of the winding, m; centred in the gap. */
  readonly thickness: number;
  readonly clearance: number;
  readonly wire: Wire;
  readonly connection: 'star' | 'delta';
  readonly paths: number;
  /** degC. */
  readonly temperature: number;
}
export type Winding =
  | (WindingCommon & { readonly layout: 'concentrated'; readonly opening: Opening })
  | (WindingCommon & {
      readonly layout: 'overlapped';
      /** Radii between which the legs run, m. */
      readonly legs: { readonly innerRadius: number; readonly outerRadius: number };
    });

export interface Operation {
  readonly speedRpm: number;
  readonly overspeedRpm?: number;
  /** degC. */
  readonly ambient: number;
  readonly cold?: number;
  readonly load?: Load;
  /** Of one conductor from the machine to the bridge or load, at 20 degC, ohm; 0 without a cable. */
  readonly cableResistance: number;
  /** Sound defaults are taken where it is not given. */
  readonly drag?: Drag;
  readonly cooling?: Cooling;
  readonly primeMover?: PrimeMover;
}

/** What the machine works into. */
export type Load =
  /** Diode bridge on a stiff DC voltage (V) or a resistance (ohm); `diodeDrop` of one diode, of which two conduct at a time. */
  | { readonly kind: 'bridge'; readonly voltage: number; readonly diodeDrop: number }
  | { readonly kind: 'bridge'; readonly resistance: number; readonly diodeDrop: number }
  /** Ohm per phase, in star. */
  | { readonly kind: 'resistor'; readonly resistance: number }
  /** Sinusoidal current in phase with the EMF, rms per phase, A. */
  | { readonly kind: 'drive'; readonly current: number };

/** Torque against turning:  bearing + windage w^2,  Nm and Nm s^2. */
export interface Drag {
  readonly bearing: number;
  readonly windage: number;
}

/** Speed of the air along the winding (m/s), or the heat transfer coefficient itself (W/(m^2 K)). */
export type Cooling = { readonly airSpeed: number } | { readonly h: number };

/** Power offered at the shaft against speed. */
export type PrimeMover = {
  readonly kind: 'table';
  /** Rising speeds, rpm, and powers, W. */
  readonly points: readonly (readonly [rpm: number, watt: number])[];
};

export interface Model {
  /** Radii of the slices and their weights: integral over the magnets' radial length of f dr = sum weight f(radius). */
  readonly slices: readonly { readonly radius: number; readonly weight: number }[];
  /** These are the first choice only: finer ones follow until the leg's flux settles. */
  readonly auto: boolean;
  /** Wanted relative error, from the mesh, of the effective leg flux density. */
  readonly accuracy: number;
  readonly endCorrection: boolean;
}

/** A remark that does not stop the work; `key` is the dotted path in the machine file or the results. */
export interface Warning {
  readonly key: string;
  readonly text: string;
}
