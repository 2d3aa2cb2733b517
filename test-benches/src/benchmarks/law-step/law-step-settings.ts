/** Settings that a law and its bare counterpart share. */
export const scanS = 0.05;
export const periodS = 1;
export const omega = (2 * Math.PI) / periodS;
export const amplitude = 0.1;
/** Corners of washout and low-pass, rad/s. */
export const washout = 0.2 * omega;
export const lowPass = 0.2 * omega;
export const gain = 0.05;
/** Dither frequency of a second actuator over that of the first. */
export const secondRatio = 1.4;
