import type { WiredChannel } from '@cresthold/shared';
import type { BenchDefinition } from './bench-definition.js';
import type { FaultedModel } from './faulted-model.js';
import { RegisterDevice } from './register-device.js';
import type { RegisterTable, RegisterType } from './register-map.types.js';
import { decodeValue, encodeValue, wordsOfType } from './register-words.js';

/** A write that the bench took, by the name of the value in its model. */
export interface VirtualWrite {
  readonly tS: number;
  readonly name: string;
  readonly engineering: number;
}

/** What stands between a rig's channels and a model where no bytes travel. */
export interface VirtualWire {
  read(channel: WiredChannel): number;
  readTrace(channel: WiredChannel): ArrayLike<number>;
  write(channel: WiredChannel, value: number): void;
}

/** An address of the modbus adapters, as far as the benches' rigs use it. */
interface ModbusAddress {
  readonly table: RegisterTable;
  readonly address: number;
  readonly type: RegisterType;
  readonly scale?: number;
  readonly points?: number;
}

/**
 * The wire of a bench in virtual time: over its registers, so that addresses, types and grids of the rig's
 * document are those of the bench; on a bench with commands by name, `nameOf` a channel.
 *
 * @param told of each write that the bench took
 */
export function virtualWire(
  definition: BenchDefinition,
  model: FaultedModel,
  told: (name: string, engineering: number) => void,
  nameOf: (channel: WiredChannel) => string = (channel) => channel.id,
): VirtualWire {
  if (definition.wire.kind !== 'serial-text') {
    return overRegisters(
      new RegisterDevice(definition.wire.registers, model, ({ name, engineering }) =>
        told(name, engineering),
      ),
    );
  }
  return {
    read: (channel) => model.read(nameOf(channel)),
    readTrace: (channel) => model.readTrace(nameOf(channel)),
    write(channel, value) {
      if (model.write(nameOf(channel), value)) told(nameOf(channel), value);
    },
  };
}

function overRegisters(device: RegisterDevice): VirtualWire {
  const wordsAt = ({ table, address, type, points = 1 }: ModbusAddress) =>
    device.read(table, address, points * wordsOfType(type));
  const addressOf = (channel: WiredChannel) => channel.address as unknown as ModbusAddress;
  return {
    read(channel) {
      const address = addressOf(channel);
      return decodeValue(wordsAt(address), address.type, address.scale ?? 1);
    },
    readTrace(channel) {
      const address = addressOf(channel);
      const words = wordsAt(address);
      const each = wordsOfType(address.type);
      return Array.from({ length: address.points ?? 1 }, (_, i) =>
        decodeValue(words, address.type, address.scale ?? 1, i * each),
      );
    },
    write(channel, value) {
      const { table, address, type, scale = 1 } = addressOf(channel);
      if (table !== 'coil' && table !== 'holding-register') throw new Error(`"${channel.id}" is only read.`);
      device.write(table, address, encodeValue(value, type, scale));
    },
  };
}

/** Grid of an actuator's wire, for the guard and preflight; none for floats and texts. */
export function gridOf(channel: WiredChannel): { step: number; origin: number } | null {
  const { type, scale } = channel.address as unknown as Partial<ModbusAddress>;
  return type === undefined || type === 'f32' ? null : { step: scale ?? 1, origin: 0 };
}
