import type { Socket } from 'node:net';
import { performance } from 'node:perf_hooks';
import { DomainError } from '@cresthold/shared';
import type { Adapter } from '../contract.js';
import { type ModbusAddress, modbusTcpAddressSchema } from '../modbus/modbus-address.schema.js';
import { ModbusLink } from '../modbus/modbus-link.js';
import { parseAddresses } from '../modbus/parse-addresses.js';
import { ModbusReadPlan } from '../modbus/modbus-plan.js';
import { ModbusSession } from '../modbus/modbus-session.js';
import { parseOrMisconfigured } from '../parse-or-misconfigured.js';
import { MbapPort } from './mbap-port.js';
import {
  type ModbusTcpConfiguration,
  modbusTcpConfigurationSchema,
} from './modbus-tcp-configuration.schema.js';
import { connectionFault, destroySocket, openSocket } from './open-socket.js';

/**
 * Modbus TCP. A peer that closes or resets is lost at once; one that falls silent (a cut cable sends
 * no farewell) is lost after `silencesUntilLost` requests in a row without any answer.
 */
export const modbusTcpAdapter: Adapter<ModbusTcpConfiguration, ModbusAddress> = {
  manifest: {
    id: 'modbus-tcp',
    title: 'Modbus TCP',
    contract: '^1.1.0',
    configurationSchema: modbusTcpConfigurationSchema,
    addressSchema: modbusTcpAddressSchema,
  },

  async open(configuration, signal) {
    const parsed = parseOrMisconfigured(modbusTcpConfigurationSchema, configuration);
    const socket = await openSocket(parsed, signal);
    const { timeoutMs, gap, readBack, units, mostBackOffMs } = parsed;
    return new ModbusSession(linkOver(socket, parsed), {
      addressSchema: modbusTcpAddressSchema,
      timeoutMs,
      unitTimeoutMs: parsed.unitTimeoutMs ?? timeoutMs,
      units,
      mostBackOffMs,
      gap,
      readBack,
      nowMs: () => performance.now(),
    });
  },

  estimate(configuration, addresses) {
    const { gap } = parseOrMisconfigured(modbusTcpConfigurationSchema, configuration);
    const parsed = parseAddresses(modbusTcpAddressSchema, addresses);
    return { requests: new ModbusReadPlan(parsed, gap).requests, wireS: null };
  },
};

/** The socket tells of resets, which no answer does. */
function linkOver(socket: Socket, configuration: ModbusTcpConfiguration): ModbusLink {
  const target = { host: configuration.host, port: configuration.port };
  const label = `${target.host}:${target.port}`;
  const link = new ModbusLink(new MbapPort(socket, label), {
    label,
    silencesUntilLost: configuration.silencesUntilLost,
    release: () => destroySocket(socket),
  });
  socket.on('error', (error) => void link.end(connectionFault(target, error)));
  socket.on('close', () => {
    const message = `${label}: the device closed the connection.`;
    void link.end(new DomainError('adapter.disconnected', message));
  });
  return link;
}
