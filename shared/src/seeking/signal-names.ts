/**
 * Names of signals that each actuator has, actuator by actuator: plain for one (`gradient`), numbered from 1 for
 * several (`gradient1`, `gradient2`).
 */
export function perActuator(actuators: number, names: readonly string[]): string[] {
  if (actuators === 1) return [...names];
  return Array.from({ length: actuators }, (_, i) => names.map((name) => `${name}${i + 1}`)).flat();
}
