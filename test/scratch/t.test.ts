import { test } from 'vitest';
import { SingleDiodeCurve } from '/work/main/src/source/single-diode-curve.js';
import { wrightOmega } from '/work/main/src/numeric/wright-omega.js';
import { exp } from '/work/main/src/numeric/exponential.js';
test('x', () => {
  const k = 1.380649e-23/1.602176634e-19;
  const c = new SingleDiodeCurve({photocurrent:8.214, saturationCurrent:9.825e-8, idealityVoltage:54*1.3*k*298.15, seriesResistance:0.221, shuntConductance:1/415.405});
  for (const v of [0,10,15,20,25,26.3,30,31,32.8]) console.log(v, c.current(v), c.slope(v));
  console.log(c.openCircuitVoltage, c.peaks()[0]);
  for (const x of [-7,-6.0001,-5.9999,-3,0,1,5,39.99,40.01,300]) { const w = wrightOmega(x); console.log(x, w, w+Math.log(w)-x); }
  const N=2e6; let s=0;
  for (let r=0;r<3;r++){ const t=process.hrtime.bigint(); for (let i=0;i<N;i++) s+=c.current(32.8*i/N); console.log('ns/pt', Number(process.hrtime.bigint()-t)/N); }
  for (let r=0;r<3;r++){ const t=process.hrtime.bigint(); for (let i=0;i<N;i++) s+=exp(32.8*i/N-20); console.log('exp ns', Number(process.hrtime.bigint()-t)/N); }
  for (let r=0;r<3;r++){ const t=process.hrtime.bigint(); for (let i=0;i<N;i++) s+=Math.exp(32.8*i/N-20); console.log('Math.exp ns', Number(process.hrtime.bigint()-t)/N); }
  console.log(s);
});
