import type { Prices } from '../machine.js';

/** Parts that have a price per kilogram. */
export type PricedPart = 'magnets' | 'copper' | 'steel';

/** kg; a part that is not there, or whose mass is not known, is absent. */
export type PricedMasses = { readonly [P in PricedPart]?: number };

/** What the material costs, in the currency of the prices. */
export interface Costs {
  readonly currency: string;
  /** Mass times price, of each part that has both. */
  readonly parts: { readonly [P in PricedPart]?: number };
  /** Sum of those. */
  readonly priced: number;
  /** The same, where nothing is missing. */
  readonly total?: number;
  /** Keys of the machine file whose price is missing for a part that is there. */
  readonly missingPrices: readonly string[];
  /** Parts with a price whose mass is not known. */
  readonly missingMasses: readonly PricedPart[];
}

const PARTS: readonly PricedPart[] = ['magnets', 'copper', 'steel'];

/**
 * Cost of the active material:  sum mass x price per kilogram.
 *
 * @param expected  parts that the machine has, whether or not their masses are known
 */
export function describeCosts(prices: Prices, masses: PricedMasses, expected: readonly PricedPart[]): Costs {
  const parts: { [P in PricedPart]?: number } = {};
  const missingPrices: string[] = [];
  const missingMasses: PricedPart[] = [];
  for (const part of PARTS) {
    const [price, mass] = [prices[part], masses[part]];
    if (price !== undefined && mass !== undefined) parts[part] = price * mass;
    if (!expected.includes(part)) continue;
    if (price === undefined) missingPrices.push(`prices.${part}`);
    if (mass === undefined) missingMasses.push(part);
  }
  const priced = Object.values(parts).reduce((sum, cost) => sum + cost, 0);
  const complete = missingPrices.length === 0 && missingMasses.length === 0;
  return { currency: prices.currency, parts, priced, ...(complete && { total: priced }), missingPrices, missingMasses };
}
