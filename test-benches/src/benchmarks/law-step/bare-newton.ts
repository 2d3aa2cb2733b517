import type { BareLaw } from './bare-laws.js';
import { lowPass, omega, periodS, scanS, secondRatio, washout } from './law-step-settings.js';

const boxed = (x: number) => (x > 9.9 ? 9.9 : x < -9.9 ? -9.9 : x);
const turn = 2 * Math.PI;

/** Newton's law for two actuators, written out by hand; see the other bare laws. */
export const bareNewton: BareLaw = (steps, a) => {
  const [omegaV, washoutV, lowPassV] = [omega * secondRatio, washout * secondRatio, lowPass * secondRatio];
  const [hwU, hlU, hwV, hlV] = [washout, lowPass, washoutV, lowPassV].map(
    (corner) => (corner * scanS) / 2,
  ) as [number, number, number, number];
  const hessianHalf = (0.05 * omega * scanS) / 2;
  const share = 1 - Math.exp(-0.1 * scanS);
  const factor = (sum: number) => [1, -washout / sum] as const;
  const [uu, vv, plus, minus] = [
    factor(2 * omega),
    factor(2 * omegaV),
    factor(omega + omegaV),
    factor(omega - omegaV),
  ];
  let [u, v, du, dv, pu, pv] = [1, 1, 0, 0, 0, 0];
  let [lowU, lowV, lowH, last] = [-2, -2, -2, -2];
  let [gU, gV, lastU, lastV] = [0, 0, 0, 0];
  let [hUU, hUV, hVV, lastUU, lastUV, lastVV] = [-2, 0, -2, -2, 0, -2];
  let [p00, p10, p11] = [2, 0, 2];
  let [l00, l10, l11] = [Math.SQRT2, 0, Math.SQRT2];
  let [goodU, goodV, candidateU, candidateV, validS] = [1, 1, 1, 1, 0];
  for (let i = 0; i < steps; i += 1) {
    const y = -((u + du) ** 2) - (v + dv) ** 2;
    if (!(y <= 1e100 && y >= -1e100)) {
      [u, v] = [goodU, goodV];
      continue;
    }
    lowU = ((1 - hwU) * lowU + hwU * (y + last)) / (1 + hwU);
    lowV = ((1 - hwV) * lowV + hwV * (y + last)) / (1 + hwV);
    lowH = ((1 - hwU) * lowH + hwU * (y + last)) / (1 + hwU);
    last = y;
    const demodulatedU = (2 / a) * Math.sin(pu) * (y - lowU);
    gU = ((1 - hlU) * gU + hlU * (demodulatedU + lastU)) / (1 + hlU);
    lastU = demodulatedU;
    const demodulatedV = (2 / a) * Math.sin(pv) * (y - lowV);
    gV = ((1 - hlV) * gV + hlV * (demodulatedV + lastV)) / (1 + hlV);
    lastV = demodulatedV;
    const [su, cu, sv, cv, washed] = [Math.sin(pu), Math.cos(pu), Math.sin(pv), Math.cos(pv), y - lowH];
    const nUU = (-8 / (a * a)) * (uu[0] * (cu * cu - su * su) + uu[1] * 2 * su * cu) * washed;
    const nVV = (-8 / (a * a)) * (vv[0] * (cv * cv - sv * sv) + vv[1] * 2 * sv * cv) * washed;
    const difference = minus[0] * (cu * cv + su * sv) + minus[1] * (su * cv - cu * sv);
    const sum = plus[0] * (cu * cv - su * sv) + plus[1] * (su * cv + cu * sv);
    const nUV = (2 / (a * a)) * (difference - sum) * washed;
    hUU = ((1 - hessianHalf) * hUU + hessianHalf * (nUU + lastUU)) / (1 + hessianHalf);
    hUV = ((1 - hessianHalf) * hUV + hessianHalf * (nUV + lastUV)) / (1 + hessianHalf);
    hVV = ((1 - hessianHalf) * hVV + hessianHalf * (nVV + lastVV)) / (1 + hessianHalf);
    [lastUU, lastUV, lastVV] = [nUU, nUV, nVV];
    const [t00, t10, t11] = [
      p00 + share * (-hUU - p00),
      p10 + share * (-hUV - p10),
      p11 + share * (-hVV - p11),
    ];
    const rest = t11 - (t10 * t10) / t00;
    if (t00 > 0.02 && rest > 0.02) {
      [p00, p10, p11] = [t00, t10, t11];
      l00 = Math.sqrt(t00);
      l10 = t10 / l00;
      l11 = Math.sqrt(rest);
    }
    const first = gU / l00;
    const second = (gV - l10 * first) / l11;
    const stepV = second / l11;
    const stepU = (first - l10 * stepV) / l00;
    u = boxed(u + 0.1 * stepU * scanS);
    v = boxed(v + 0.1 * stepV * scanS);
    validS += scanS;
    if (validS >= periodS) {
      [goodU, goodV, candidateU, candidateV, validS] = [candidateU, candidateV, u, v, 0];
    }
    pu = (pu + omega * scanS) % turn;
    pv = (pv + omegaV * scanS) % turn;
    du = a * Math.sin(pu);
    dv = a * Math.sin(pv);
  }
  return u + v + du + dv;
};
