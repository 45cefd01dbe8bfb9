import type { Cooling, Winding } from '../machine.js';
import { legEnds } from '../winding/coil-window.js';
import { forcedPlate, naturalPlate, rotatingDisc } from './convection.js';

/** The faces by which a winding gives off its heat. */
export interface WindingFaces {
  /** m. */
  readonly innerRadius: number;
  readonly outerRadius: number;
  /** Both faces together, m^2. */
  readonly area: number;
}

/**
 * Both faces of the ring the winding fills, from one leg's width inside the opening (overlapped: the legs' ends) to one
 * outside it; holes of the coils count, for they are cast full. What the rims and the cast beyond add is left out.
 */
export function windingFaces(winding: Winding): WindingFaces {
  const ends = legEnds(winding);
  const innerRadius = Math.max(0, ends.innerRadius - winding.legWidth);
  const outerRadius = ends.outerRadius + winding.legWidth;
  return { innerRadius, outerRadius, area: 2 * Math.PI * (outerRadius ** 2 - innerRadius ** 2) };
}

/** What carries the heat off. */
export type CoolingKind = 'given' | 'natural' | 'rotating disc' | 'forced air';

/** Heat transfer from the winding's faces. */
export interface HeatTransfer {
  /** W/(m^2 K). */
  readonly h: number;
  readonly kind: CoolingKind;
}

/** Heat transfer as the winding is warmer than the air by `rise`, K; it does not fall as that grows. */
export type Transfer = (rise: number) => HeatTransfer;

/** Share by which convection worked out from correlations may be off. */
export const CONVECTION_BAND = 0.3;

/**
 * Heat transfer from the winding: as given, or the greatest of
 *
 *   the discs' stirring    a disc as large as the winding, turning in still air (`rotatingDisc`): the winding stands and the
 *                          discs turn, which is taken for the same; no published relation for the gap itself is used
 *   air blown at it        a plate as long as the ring is wide, in air of the given speed (`forcedPlate`)
 *   natural convection     an upright plate as high as the ring is wide (`naturalPlate`); the least there is
 *
 * Within some 30 % at best (practice). Air that comes into the gap is taken to have the temperature of the surroundings.
 *
 * @param omega of the shaft, rad/s
 */
export function windingTransfer(faces: WindingFaces, omega: number, cooling: Cooling | undefined): Transfer {
  if (cooling !== undefined && 'h' in cooling) return () => ({ h: cooling.h, kind: 'given' });
  const width = faces.outerRadius - faces.innerRadius;
  const stirred: HeatTransfer = { h: rotatingDisc(faces.outerRadius, Math.abs(omega)), kind: 'rotating disc' };
  const blown: HeatTransfer = { h: forcedPlate(width, cooling?.airSpeed ?? 0), kind: 'forced air' };
  const moved = blown.h > stirred.h ? blown : stirred;
  return (rise) => {
    const natural = naturalPlate(width, rise);
    return natural > moved.h ? { h: natural, kind: 'natural' } : moved;
  };
}

/** What was taken for the winding's cooling, in words. */
export function describeCooling({ h, kind }: HeatTransfer, { innerRadius, outerRadius, area }: WindingFaces): string {
  const how = {
    given: 'as given',
    natural: 'natural convection from an upright plate (Churchill and Chu)',
    'rotating disc': 'as from a disc that turns in still air (Wagner; Cobb and Saunders)',
    'forced air': 'air blown along a plate (textbook)',
  }[kind];
  const band = kind === 'given' ? '' : `, good to about ${100 * CONVECTION_BAND} %`;
  const millimetres = (radius: number): string => (1000 * radius).toFixed(1);
  return (
    `${h.toFixed(1)} W/(m2 K) ${how}${band}, from both faces of the ring ${millimetres(innerRadius)} to ` +
    `${millimetres(outerRadius)} mm, ${area.toFixed(4)} m2`
  );
}
