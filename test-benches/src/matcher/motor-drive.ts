/** A capacitor that a stepper motor turns: it moves no faster than its drive, in whole steps. */
export interface MotorDrive {
  /** Exact place of the drive, % of travel. */
  readonly placePct: number;
}

/** Greatest speed, % of travel per s of bench time. */
export const motorRatePctPerS = 10;
/** One step, % of travel. */
export const motorStepPct = 0.02;

export function stepMotor(drive: MotorDrive, commandPct: number, dtS: number): MotorDrive {
  const reach = motorRatePctPerS * dtS;
  const goal = onStep(commandPct);
  return { placePct: drive.placePct + Math.min(Math.max(goal - drive.placePct, -reach), reach) };
}

/** The whole step nearest to a place. */
export function onStep(pct: number): number {
  return Math.round(pct / motorStepPct) * motorStepPct;
}
