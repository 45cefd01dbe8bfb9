import { test } from 'vitest';
import { wholeCoils } from '../../../packages/machine-models/src/inductance/whole-coils.js';
import { hutHydro, overlappedHydro } from '../../helpers/machines.js';
import { ironless } from '../slices/variants.js';
test('x', () => {
  const tell = (p: any, n: number) => [p.self * n, p.mutual * n, (p.self - p.mutual) * n].map((v) => (v * 1e3).toFixed(5)).join(' ');
  for (const [name, machine, n] of [['hut', hutHydro(), 58**2], ['ironless', ironless(), 58**2], ['ov', overlappedHydro(), 400], ['ov ironless', { ...overlappedHydro(), rotor: ironless().rotor }, 400]] as const) {
    for (const f of [{ reach: 8, step: 0.8, stations: 0.15 }, { reach: 12, step: 0.8, stations: 0.2 },{ reach: 12, step: 1.2, stations: 0.2 }, { reach: 16, step: 0.6, stations: 0.1 }]) {
      wholeCoils(machine, f);
      const a = performance.now();
      const r = wholeCoils(machine, f) as any;
      console.log(name, JSON.stringify(f), (performance.now() - a).toFixed(1), '3D', tell(r.whole, n), '2D', tell(r.slices, n), 'diff', tell({ self: r.whole.self - r.slices.self, mutual: r.whole.mutual - r.slices.mutual }, n), 'zero', tell(r.zero, n));
    }
  }
}, 100000);
