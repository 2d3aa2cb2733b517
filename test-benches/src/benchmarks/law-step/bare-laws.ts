import { gain, lowPass, omega, periodS, scanS, washout } from './law-step-settings.js';

/**
 * The arithmetic of each law written out by hand for the settings of the benchmark: one actuator (Newton: two), all
 * state in local variables, the checks of the law kept (valid number, box, trial). Each returns where it ended, so
 * that nothing is optimised away.
 */
export type BareLaw = (steps: number, amplitude: number) => number;

const valid = (y: number) => y <= 1e100 && y >= -1e100;
const boxed = (x: number) => (x > 9.9 ? 9.9 : x < -9.9 ? -9.9 : x);
const turn = 2 * Math.PI;

export const bareGradient: BareLaw = (steps, a) => climbSlope(steps, a, 0);
export const bareSlope: BareLaw = (steps, a) => climbSlope(steps, a, 0.3);

function climbSlope(steps: number, a: number, reference: number): number {
  const [hw, hl] = [(washout * scanS) / 2, (lowPass * scanS) / 2];
  let [x, d, phase, low, last, g, lastDemodulated] = [1, 0, 0, -1, -1, 0, 0];
  let [good, candidate, validS] = [1, 1, 0];
  for (let i = 0; i < steps; i += 1) {
    const y = -((x + d) ** 2);
    if (!valid(y)) {
      x = good;
      continue;
    }
    low = ((1 - hw) * low + hw * (y + last)) / (1 + hw);
    last = y;
    const demodulated = (2 / a) * Math.sin(phase) * (y - low);
    g = ((1 - hl) * g + hl * (demodulated + lastDemodulated)) / (1 + hl);
    lastDemodulated = demodulated;
    x = boxed(x + gain * (g - reference) * scanS);
    validS += scanS;
    if (validS >= periodS) {
      good = candidate;
      candidate = x;
      validS = 0;
    }
    phase = (phase + omega * scanS) % turn;
    d = a * Math.sin(phase);
  }
  return x + d;
}

export const bareConstrained: BareLaw = (steps, a) => {
  const [hw, hl] = [(washout * scanS) / 2, (lowPass * scanS) / 2];
  let [x, d, phase, low, last, g, lastD] = [1, 0, 0, -1, -1, 0, 0];
  let [lowH, lastH, gH, lastDH, mean] = [2, 2, 0, 0, 2];
  let [good, candidate, validS] = [1, 1, 0];
  for (let i = 0; i < steps; i += 1) {
    const y = -((x + d) ** 2);
    const h = 3 - (x + d);
    if (!valid(y) || !valid(h)) {
      x = good;
      continue;
    }
    low = ((1 - hw) * low + hw * (y + last)) / (1 + hw);
    last = y;
    const demodulated = (2 / a) * Math.sin(phase) * (y - low);
    g = ((1 - hl) * g + hl * (demodulated + lastD)) / (1 + hl);
    lastD = demodulated;
    lowH = ((1 - hw) * lowH + hw * (h + lastH)) / (1 + hw);
    const demodulatedH = (2 / a) * Math.sin(phase) * (h - lowH);
    gH = ((1 - hl) * gH + hl * (demodulatedH + lastDH)) / (1 + hl);
    lastDH = demodulatedH;
    mean = ((1 - hl) * mean + hl * (h + lastH)) / (1 + hl);
    lastH = h;
    let u = (gain * g) / a;
    const s = gH * a;
    const excess = s * u + 0.1 * mean;
    if (excess < 0 && s !== 0) u -= excess / s;
    x = boxed(x + u * a * scanS);
    validS += scanS;
    if (validS >= periodS) {
      good = candidate;
      candidate = x;
      validS = 0;
    }
    phase = (phase + omega * scanS) % turn;
    d = a * Math.sin(phase);
  }
  return x + d;
};

export const bareDiscrete: BareLaw = (steps, a) => {
  let [x, d, phase, last, washed] = [1, 0, -Math.PI / 2, -1, 0];
  let [good, candidate, count] = [1, 1, 0];
  for (let i = 0; i < steps; i += 1) {
    const y = -((x + d) ** 2);
    if (!valid(y)) {
      x = good;
      continue;
    }
    washed = y - last + 0.9 * washed;
    last = y;
    x = boxed(x + gain * scanS * (2 / a) * Math.cos(phase) * washed);
    count += 1;
    if (count >= periodS / scanS) {
      good = candidate;
      candidate = x;
      count = 0;
    }
    phase = (phase + omega * scanS) % turn;
    d = a * Math.cos(phase);
  }
  return x + d;
};

export const bareLeastSquares: BareLaw = (steps, a) => {
  let [x, d, phase, c, g, p00, p01, p11] = [1, 0, 0, 0, 0, 1e6, 0, 1e6];
  let [good, candidate, validS] = [1, 1, 0];
  for (let i = 0; i < steps; i += 1) {
    const y = -((x + d) ** 2);
    if (!valid(y)) {
      x = good;
      continue;
    }
    const kept = Math.exp(-scanS / periodS);
    const r = Math.sin(phase);
    const [k0, k1] = [p00 + p01 * r, p01 + p11 * r];
    const scatter = kept + k0 + r * k1;
    const error = y - c - r * g;
    c += (k0 / scatter) * error;
    g += (k1 / scatter) * error;
    p00 = (p00 - (k0 / scatter) * k0) / kept;
    p01 = (p01 - (k1 / scatter) * k0) / kept;
    p11 = (p11 - (k1 / scatter) * k1) / kept;
    x = boxed(x + ((gain * g) / a) * scanS);
    validS += scanS;
    if (validS >= periodS) {
      good = candidate;
      candidate = x;
      validS = 0;
    }
    phase = (phase + omega * scanS) % turn;
    d = a * Math.sin(phase);
  }
  return x + d;
};

export const bareBoundedRate: BareLaw = (steps, a) => {
  let [x, applied, phase] = [1, 1, 0];
  let [good, candidate, validS] = [1, 1, 0];
  for (let i = 0; i < steps; i += 1) {
    const y = -(applied ** 2);
    if (!valid(y)) {
      x = good;
      continue;
    }
    validS += scanS;
    if (validS >= periodS) {
      good = candidate;
      candidate = x;
      validS = 0;
    }
    const angle = ((2 * gain) / (a * a * omega)) * (y + 1);
    const next = applied + a * omega * Math.cos(phase + (omega * scanS) / 2 - angle) * scanS;
    phase = (phase + omega * scanS) % turn;
    const inside = next > 10 ? 10 : next < -10 ? -10 : next;
    x = boxed(inside - a * Math.sin(phase - angle));
    applied = x + (inside - x);
  }
  return applied;
};

export const bareSpsa: BareLaw = (steps, a) => {
  let [x, side, sign, elapsedS, sum, count, above, trial, counter] = [1, 1, 1, 0, 0, 0, 0, 0, 1];
  let [good, candidate, validS, d] = [1, 1, 0, a];
  for (let i = 0; i < steps; i += 1) {
    const y = -((x + d) ** 2);
    if (!valid(y)) {
      x = good;
      continue;
    }
    elapsedS += scanS;
    const isOver = elapsedS + scanS / 2 >= periodS / 2;
    if (isOver || elapsedS > 0) {
      sum += y;
      count += 1;
    }
    if (isOver) {
      const c = a / (trial + 1) ** 0.101;
      if (side === 1) above = sum / count;
      else {
        x = boxed(x + (gain / (trial + 1) ** 0.602) * ((above - sum / count) / (2 * c * sign)));
        trial += 1;
        counter = (Math.imul(counter, 1_664_525) + 1_013_904_223) >>> 0;
        sign = counter < 2_147_483_648 ? -1 : 1;
      }
      side = -side;
      d = side * sign * c;
      elapsedS = 0;
      sum = 0;
      count = 0;
    }
    validS += scanS;
    if (validS >= periodS) {
      good = candidate;
      candidate = x;
      validS = 0;
    }
  }
  return x;
};

export const barePerturbObserve: BareLaw = (steps, a) => {
  let [x, direction, elapsedS, sum, count, before] = [1, 1, 0, 0, 0, NaN];
  let [good, candidate, validS] = [1, 1, 0];
  for (let i = 0; i < steps; i += 1) {
    const y = -(x ** 2);
    if (!valid(y)) {
      x = good;
      continue;
    }
    elapsedS += scanS;
    const isOver = elapsedS + scanS / 2 >= periodS / 2;
    if (isOver || elapsedS > 0) {
      sum += y;
      count += 1;
    }
    if (isOver) {
      const mean = sum / count;
      if (mean < before) direction = -direction;
      before = mean;
      x = boxed(x + direction * a);
      elapsedS = 0;
      sum = 0;
      count = 0;
    }
    validS += scanS;
    if (validS >= periodS / 2) {
      good = candidate;
      candidate = x;
      validS = 0;
    }
  }
  return x;
};
