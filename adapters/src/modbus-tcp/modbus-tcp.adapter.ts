import type { Socket } from 'node:net';
import { performance } from 'node:perf_hooks';
import { DomainError } from '@cresthold/shared';
import modbus from 'modbus-serial';
import type { Adapter } from '../contract.js';
import { type ModbusAddress, modbusAddressSchema } from '../modbus/modbus-address.schema.js';
import { ModbusLink } from '../modbus/modbus-link.js';
import { ModbusSession } from '../modbus/modbus-session.js';
import { parseOrMisconfigured } from '../parse-or-misconfigured.js';
import {
  type ModbusTcpConfiguration,
  modbusTcpConfigurationSchema,
} from './modbus-tcp-configuration.schema.js';
import { connectionFault, destroySocket, openSocket } from './open-socket.js';

const ModbusClientClass = modbus.default;

/**
 * Modbus TCP. A peer that closes or resets is lost at once; one that falls silent (a cut cable sends
 * no farewell) is lost after `silencesUntilLost` requests in a row without any answer.
 */
export const modbusTcpAdapter: Adapter<ModbusTcpConfiguration, ModbusAddress> = {
  manifest: {
    id: 'modbus-tcp',
    title: 'Modbus TCP',
    contract: '^1.0.0',
    configurationSchema: modbusTcpConfigurationSchema,
    addressSchema: modbusAddressSchema,
  },

  async open(configuration, signal) {
    const parsed = parseOrMisconfigured(modbusTcpConfigurationSchema, configuration);
    const socket = await openSocket(parsed, signal);
    const link = await linkOver(socket, parsed);
    const { timeoutMs, gap } = parsed;
    return new ModbusSession(link, { timeoutMs, gap, nowMs: () => performance.now() });
  },
};

/** The socket is ours, not the library's: it tells of resets, which the library keeps to itself. */
async function linkOver(socket: Socket, configuration: ModbusTcpConfiguration): Promise<ModbusLink> {
  const client = new ModbusClientClass();
  const target = { host: configuration.host, port: configuration.port };
  await client.linkTCP(socket, { port: configuration.port });
  const link = new ModbusLink(client, {
    label: `${target.host}:${target.port}`,
    silencesUntilLost: configuration.silencesUntilLost,
    release: async () => {
      // Also stops the library's timer of the request under way.
      client.destroy(() => undefined);
      await destroySocket(socket);
    },
  });
  socket.on('error', (error) => void link.end(connectionFault(target, error)));
  socket.on('close', () => {
    const message = `${target.host}:${target.port}: the device closed the connection.`;
    void link.end(new DomainError('adapter.disconnected', message));
  });
  return link;
}
