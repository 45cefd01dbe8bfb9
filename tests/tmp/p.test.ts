import { test } from 'vitest';
import { solveProbes, type Probe, type Section } from '@gapwright/fem-core';
const MU0 = 4e-7*Math.PI;
test('x', () => {
  for (const accuracy of [1e-2, 1e-3, 1e-4, 1e-5]) {
    const section: Section = { outline: { kind: 'circle', centre: [0, 0], radius: 0.02 }, background: 'air', regions: [{ name: 'wire', shape: { kind: 'circle', centre: [0, 0], radius: 0.002 } }] };
    const probes: Probe[] = [{ kind: 'linkage', name: 'l', of: 'wire', turns: 1 }, { kind: 'point', name: 'p', at: [0.004, 0] }, { kind: 'flux', name: 'f', from: [0, 0], to: [0.01, 0] }, {kind:'mean', name:'m', over:['wire']}, {kind:'line', name:'line', from:[0.001,0.0005], to:[0.015,0.0005], points: 5}];
    const t0 = performance.now();
    const r = solveProbes(section, { materials: { air: { kind: 'linear', muR: 1 }, wire: { kind: 'linear', muR: 1 } }, current: { wire: 10 } }, probes, { accuracy });
    const [l, p, f, m, line] = r.answers as any[];
    const L = 5.10517019e-7*10/1; const W = 2.5e-6 + 2.302585093e-5;
    console.log(accuracy, 'tri', r.field.mesh.triangles.length/3, 'meshes', r.meshes, r.accurate, r.error.toExponential(2), (performance.now()-t0).toFixed(0)+'ms');
    const show = (n: string, got: number, want: number, err: number) => console.log('  ', n, got.toExponential(7), 'true', (Math.abs(got-want)/Math.abs(want)).toExponential(2), 'est', (err/Math.abs(want)).toExponential(2), 'ratio', (Math.abs(got-want)/err).toFixed(3));
    show('W', r.energy, W, r.energyError); show('C', r.coenergy, W, r.coenergyError); show('link', l.linkage, L, l.error);
    show('A', p.value.a, 3.21887582e-6, p.error.a); show('B', Math.hypot(p.value.bx,p.value.by), 5e-4, p.error.b); show('flux', f.flux, 5.60517019e-6-1.38629436e-6, f.error);
    show('mean', m.b, MU0*10/(2*Math.PI*0.002)*2/3, m.error);
  }
});
