/**
 * A piezo actuator with hysteresis: in proportion to the voltage, and plays of several widths beside it, each of
 * which follows only once the voltage has come through its width. Going up and down between two voltages it runs
 * round a loop, and after a turn it first moves less than later.
 *
 * @source play operators of Prandtl and Ishlinskii as in K. Kuhnen (2003), "Modeling, identification and
 * compensation of complex hysteretic nonlinearities", European Journal of Control 9:407–418 (from memory)
 */
export interface PiezoStage {
  /** Output of each play, V. */
  readonly plays: Float64Array;
}

/** Travel per volt that follows at once, and that behind each play of so many volts to either side; µm/V. */
const direct = 0.3;
const behind = [
  { halfWidthV: 1.5, umPerV: 0.04 },
  { halfWidthV: 4, umPerV: 0.035 },
  { halfWidthV: 8, umPerV: 0.025 },
] as const;

/** Steps of the digital-to-analogue converter: 12 bits over 100 V. */
export const converterStepV = 100 / 4096;
/** Travel per volt over a long way, µm/V. */
export const travelUmPerV = direct + behind.reduce((sum, { umPerV }) => sum + umPerV, 0);

export function createPiezoStage(voltageV: number): PiezoStage {
  return { plays: new Float64Array(behind.length).fill(voltageV) };
}

/** Moves the stage to a voltage. @returns where it stands, µm from where it is at 0 V after coming from there */
export function movePiezo(stage: PiezoStage, voltageV: number): number {
  let positionUm = direct * voltageV;
  for (let i = 0; i < behind.length; i += 1) {
    const { halfWidthV, umPerV } = behind[i] as (typeof behind)[number];
    const before = stage.plays[i] as number;
    const play = Math.max(voltageV - halfWidthV, Math.min(voltageV + halfWidthV, before));
    stage.plays[i] = play;
    positionUm += umPerV * play;
  }
  return positionUm;
}

/** What the converter makes of a commanded voltage, V. */
export function converted(voltageV: number): number {
  return Math.round(voltageV / converterStepV) * converterStepV;
}
