import type { FaultedModel } from './faulted-model.js';
import { InstructorDevice, instructorUnit } from './instructor-device.js';
import type { ModbusDevice } from './modbus-device.js';
import { ModbusException } from './modbus-exception.js';
import { answerPdu, exceptionPdu } from './modbus-pdu.js';
import { RegisterDevice, type RegisterWrite } from './register-device.js';
import type { RegisterMap, RegisterTable } from './register-map.types.js';

/** What is done with one request. */
export type ModbusReply =
  | { readonly kind: 'silence' }
  | { readonly kind: 'answer'; readonly pdu: Buffer; readonly isSpoiled: boolean };

/** Told of what was accepted and what was not. */
export interface StationWatch {
  onWrite(unit: number, write: RegisterWrite): void;
  onRefused(unit: number, register: number, values: readonly number[]): void;
}

const silence: ModbusReply = { kind: 'silence' };

/** All units of a bench, with the faults of its wire; what the Modbus faces stand on. */
export class ModbusStation {
  readonly unit: number;
  private readonly rig: RegisterDevice;
  private readonly instructor: InstructorDevice;

  /** @param catchUp brings the model to the present; called before each request */
  constructor(
    map: RegisterMap,
    unit: number | null,
    private readonly model: FaultedModel,
    private readonly catchUp: () => void,
    private readonly watch: StationWatch,
  ) {
    this.unit = unit ?? map.unit ?? 1;
    this.rig = new RegisterDevice(map, model, (write) => watch.onWrite(this.unit, write));
    this.instructor = new InstructorDevice(model, (register, value) =>
      watch.onWrite(instructorUnit, { name: 'fault', register, value, engineering: value }),
    );
  }

  has(unit: number): boolean {
    return unit === this.unit || unit === instructorUnit;
  }

  /** Answers one request; a unit that is not there by exception 0B, which a serial line leaves out. */
  answer(unit: number, pdu: Buffer): ModbusReply {
    this.catchUp();
    if (unit === instructorUnit) return plain(answerPdu(pdu, this.instructor));
    const code = pdu[0] ?? 0;
    if (unit !== this.unit) return plain(exceptionPdu(code, new ModbusException('no-such-unit')));
    if (this.model.isActive('silence') || this.model.isActive('reboot')) return silence;
    if (this.model.isActive('busy')) return plain(exceptionPdu(code, new ModbusException('busy')));
    const isSpoiled = this.model.isActive('corrupt');
    return { kind: 'answer', pdu: answerPdu(pdu, this.watched()), isSpoiled };
  }

  /** The rig's registers with failing instruments, and every refused write told of. */
  private watched(): ModbusDevice {
    return {
      read: (table, address, count) => {
        this.refuseFailing(table, address, count);
        return this.rig.read(table, address, count);
      },
      write: (table, address, values) => {
        try {
          this.rig.write(table, address, values);
        } catch (error) {
          if (error instanceof ModbusException) this.watch.onRefused(this.unit, address, values);
          throw error;
        }
      },
    };
  }

  private refuseFailing(table: RegisterTable, address: number, count: number): void {
    if (!this.model.isActive('exception')) return;
    for (const name of this.rig.namesIn(table, address, count)) {
      if (!this.model.isOfController(name)) throw new ModbusException('device-failure');
    }
  }
}

function plain(pdu: Buffer): ModbusReply {
  return { kind: 'answer', pdu, isSpoiled: false };
}
