import { expect, test } from 'vitest';
import { describeCosts } from '../../../packages/machine-models/src/costs/costs.js';

const masses = { magnets: 4.4, copper: 2.7, steel: 9.4 };
const all = ['magnets', 'copper', 'steel'] as const;

test('mass times price, and their sum', () => {
  const costs = describeCosts({ currency: 'EUR', magnets: 60, copper: 14, steel: 3 }, masses, all);
  expect(costs.parts).toEqual({ magnets: 4.4 * 60, copper: 2.7 * 14, steel: 9.4 * 3 });
  expect(costs.total).toBeCloseTo(264 + 37.8 + 28.2, 10);
  expect(costs).toMatchObject({ currency: 'EUR', missingPrices: [], missingMasses: [] });
});

test('a missing price is named and leaves no total, not a smaller one', () => {
  const costs = describeCosts({ currency: 'NZD', magnets: 60, steel: 3 }, masses, all);
  expect(costs).not.toHaveProperty('total');
  expect(costs.missingPrices).toEqual(['prices.copper']);
  expect(costs.priced).toBeCloseTo(264 + 28.2, 10);
});

test('a missing mass is named; a part that the machine does not have is not missed', () => {
  const prices = { currency: 'EUR', magnets: 60, copper: 14, steel: 3 };
  const unknown = describeCosts(prices, { magnets: 4.4, copper: 2.7 }, all);
  expect(unknown).not.toHaveProperty('total');
  expect(unknown.missingMasses).toEqual(['steel']);
  const ironless = describeCosts({ currency: 'EUR', magnets: 60, copper: 14 }, { magnets: 4.4, copper: 2.7 }, [
    'magnets',
    'copper',
  ]);
  expect(ironless.total).toBeCloseTo(301.8, 10);
});
