import type { BenchDefinition } from './bench-definition.js';
import type { BenchTruth, ModelSettings } from './bench-model.js';
import type { CommandMap } from './command-map.types.js';
import { FixedStepModel } from './fixed-step-model.js';
import { initialWatchdog, type WatchdogState } from './heartbeat-watchdog.js';
import type { RegisterMap } from './register-map.types.js';

/** The smallest bench: a bowl over one actuator, a lamp, a trace of four points; for tests of the kit. */
export class BowlModel extends FixedStepModel {
  readonly watchdog: Readonly<WatchdogState> = initialWatchdog;
  reboots = 0;
  bumps = 0;
  private place = 0;

  constructor(settings: ModelSettings) {
    super(
      [
        { name: 'place', unit: 'mm', isWritable: true },
        { name: 'lamp', isWritable: true },
        { name: 'depth', unit: 'mm' },
        { name: 'age', unit: 's' },
        { name: 'wall', unit: 'mm', points: 4 },
      ],
      settings,
      { stepS: 0.1, stepsPerReading: 1 },
    );
    this.takeReadings();
  }

  get truth(): BenchTruth {
    const loss = this.place ** 2;
    return { objective: -loss, bestObjective: 0, loss, at: { place: this.place }, best: { place: 0 } };
  }

  reboot(): void {
    this.reboots += 1;
    this.place = 0;
  }

  protected override step(): void {}

  protected override take(name: string, value: number): boolean {
    if (name === 'place') this.place = value;
    this.show(name, value);
    return true;
  }

  protected override takeReadings(): void {
    this.show('depth', this.place ** 2 + this.noise(0.1));
    this.show('age', this.tS);
    this.readTrace('wall').forEach((_, i, wall) => (wall[i] = this.tS + i / 10));
  }
}

export const bowlRegisters: RegisterMap = {
  unit: 17,
  fields: [
    { name: 'place', table: 'holding-register', address: 0, type: 'i16', scale: 0.1, writeRange: [-50, 50] },
    { name: 'depth', table: 'input-register', address: 8, type: 'f32' },
    { name: 'age', table: 'input-register', address: 10, type: 'u32', scale: 0.1, isOfController: true },
    { name: 'wall', table: 'input-register', address: 100, type: 'u16', scale: 0.1 },
    { name: 'lamp', table: 'coil', address: 172, type: 'bit' },
    { name: 'lamp', table: 'discrete-input', address: 196, type: 'bit' },
  ],
};

const bowlCommands: CommandMap = {
  model: 'BOWL-1',
  fields: [
    { name: 'place', header: 'SOURce:PLACe', decimals: 2, writeRange: [-50, 50] },
    { name: 'depth', header: 'MEASure:DEPTh', decimals: 3 },
    { name: 'wall', header: 'TRACe:WALL', decimals: 1 },
  ],
};

const base: Omit<BenchDefinition<BowlModel>, 'wire'> = {
  name: 'bowl',
  title: 'A bowl',
  speed: 1,
  nanValue: 'depth',
  ownFaults: [{ name: 'bump', what: 'somebody bumps the bench', begin: (model) => (model.bumps += 1) }],
  makeModel: (settings) => new BowlModel(settings),
};

export const bowlOverModbus: BenchDefinition<BowlModel> = {
  ...base,
  wire: { kind: 'modbus-tcp', registers: bowlRegisters },
};

export const bowlOverText: BenchDefinition<BowlModel> = {
  ...base,
  wire: { kind: 'serial-text', commands: bowlCommands },
};
