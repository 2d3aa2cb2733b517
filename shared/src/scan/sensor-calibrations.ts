import type { CalibrationInForce } from '../calibrations/calibration.schema.js';
import { compileConversion, type Convert } from '../calibrations/convert.js';
import { DomainError, type FieldFault } from '../errors/domain-error.js';
import { Quality } from '../rigs/quality.js';
import type { Rig } from '../rigs/rig.schema.js';
import type { Readings } from './readings.js';

interface CalibratedSensor {
  readonly index: number;
  readonly convert: Convert;
  /** Fixed temperature of the cold junction, °C; NaN where there is none or a channel measures it. */
  readonly coldJunctionC: number;
  /** Index of the channel that measures the cold junction, or −1. */
  readonly coldJunctionIndex: number;
}

/** Turns what the adapters brought into the values of calibrated sensors, once a scan. */
export class SensorCalibrations {
  private readonly sensors: readonly CalibratedSensor[];

  /** @throws channel.not-found naming each calibration that does not fit the rig */
  constructor(
    calibrations: readonly CalibrationInForce[],
    rig: Rig,
    private readonly readings: Readings,
  ) {
    const faults = calibrationFaults(calibrations, rig);
    if (faults.length > 0) throw new DomainError('channel.not-found', undefined, faults);
    const sensors = calibrations.map((calibration) => fit(calibration, readings));
    // A cold junction may be calibrated itself: it comes before the thermocouples that need it.
    this.sensors = sensors.sort((a, b) => a.coldJunctionIndex - b.coldJunctionIndex);
  }

  /**
   * Converts the readings of this scan. What was not read in it stays as it is, and a value outside what the
   * conversion covers, or a cold junction that is not known, makes the reading bad.
   *
   * @realtime safe: allocates nothing
   */
  apply(): void {
    for (const { index, convert, coldJunctionC, coldJunctionIndex } of this.sensors) {
      if (!this.readings.isGood(index)) continue;
      const coldC = coldJunctionIndex < 0 ? coldJunctionC : this.readings.goodValue(coldJunctionIndex);
      this.readings.set(index, convert(this.readings.values[index] ?? NaN, coldC), Quality.good);
    }
  }
}

function fit({ channel, conversion }: CalibrationInForce, readings: Readings): CalibratedSensor {
  const junction = conversion.kind === 'thermocouple' ? conversion.coldJunction : null;
  return {
    index: readings.indexOf(channel),
    convert: compileConversion(conversion),
    coldJunctionC: junction && 'celsius' in junction ? junction.celsius : NaN,
    coldJunctionIndex: junction && 'channel' in junction ? readings.indexOf(junction.channel) : -1,
  };
}

/** Faults of calibrations against a rig; empty where all fit. */
export function calibrationFaults(
  calibrations: readonly Pick<CalibrationInForce, 'channel' | 'conversion'>[],
  rig: Rig,
): FieldFault[] {
  const sensors = new Set(rig.channels.filter(({ kind }) => kind === 'sensor').map(({ id }) => id));
  const thermocouples = new Set(
    calibrations.filter(({ conversion }) => conversion.kind === 'thermocouple').map(({ channel }) => channel),
  );
  return calibrations.flatMap(({ channel, conversion }, index) => {
    const faults: FieldFault[] = [];
    if (!sensors.has(channel)) {
      const message = `The rig has no sensor "${channel}": only sensors are calibrated.`;
      faults.push({ field: `calibrations[${index}].channel`, message });
    }
    if (conversion.kind !== 'thermocouple' || !('channel' in conversion.coldJunction)) return faults;
    const field = `calibrations[${index}].conversion.coldJunction.channel`;
    const { channel: junction } = conversion.coldJunction;
    if (!sensors.has(junction)) {
      faults.push({ field, message: `The rig has no sensor "${junction}" for the cold junction.` });
    } else if (thermocouples.has(junction)) {
      const message = `"${junction}" is a thermocouple itself: its cold junction needs another kind of sensor.`;
      faults.push({ field, message });
    }
    return faults;
  });
}
