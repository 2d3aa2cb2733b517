import { performance } from 'node:perf_hooks';
import { DomainError } from '@cresthold/shared';
import type { Adapter } from '../contract.js';
import { type ModbusAddress, modbusAddressSchema } from '../modbus/modbus-address.schema.js';
import { ModbusLink } from '../modbus/modbus-link.js';
import { ModbusReadPlan } from '../modbus/modbus-plan.js';
import { ModbusSession } from '../modbus/modbus-session.js';
import { parseAddresses } from '../modbus/parse-addresses.js';
import { parseOrMisconfigured } from '../parse-or-misconfigured.js';
import {
  closeSerialPort,
  type OpenSerialPort,
  openSerialPort,
  portFault,
} from '../serial/open-serial-port.js';
import { characterTimeS } from '../serial/serial-port.schema.js';
import {
  type ModbusRtuConfiguration,
  modbusRtuConfigurationSchema,
} from './modbus-rtu-configuration.schema.js';
import { RtuPort } from './rtu-port.js';
import { type CharacterSettings, exchangeMs, silentIntervals } from './rtu-timing.js';

const nowMs = (): number => performance.now();

/**
 * Modbus RTU: several units on one serial line. A port that is gone (an adapter pulled out) is lost at once; a line
 * on which nobody answers is lost after `silencesUntilLost` requests in a row. A process opens ports on its main
 * thread only.
 */
export const modbusRtuAdapter: Adapter<ModbusRtuConfiguration, ModbusAddress> = {
  manifest: {
    id: 'modbus-rtu',
    title: 'Modbus RTU',
    contract: '^1.1.0',
    configurationSchema: modbusRtuConfigurationSchema,
    addressSchema: modbusAddressSchema,
  },

  async open(configuration, signal) {
    const parsed = parseOrMisconfigured(modbusRtuConfigurationSchema, configuration);
    const { path, timeoutMs, unitTimeoutMs, units, mostBackOffMs, gap, readBack } = parsed;
    const character = characterOf(parsed);
    const serial = await openSerialPort({ path, ...character }, signal);
    return new ModbusSession(linkOver(serial, parsed), {
      addressSchema: modbusAddressSchema,
      timeoutMs,
      unitTimeoutMs,
      units,
      mostBackOffMs,
      gap,
      readBack,
      nowMs,
      wireMs: (request) => exchangeMs(request, character),
    });
  },

  estimate(configuration, addresses) {
    const parsed = parseOrMisconfigured(modbusRtuConfigurationSchema, configuration);
    const plan = new ModbusReadPlan(parseAddresses(modbusAddressSchema, addresses), parsed.gap);
    const character = characterOf(parsed);
    const wireMs = plan
      .everyRequest()
      .reduce((sum, request) => sum + exchangeMs(request, character) + parsed.turnaroundMs, 0);
    return { requests: plan.requests, wireS: wireMs / 1000 };
  },
};

/** A character of RTU has eight data bits (MODBUS over Serial Line V1.02, 2.5.1). */
function characterOf({ baudRate, parity, stopBits }: ModbusRtuConfiguration): CharacterSettings {
  return { baudRate, dataBits: 8, parity, stopBits };
}

function linkOver(serial: OpenSerialPort, configuration: ModbusRtuConfiguration): ModbusLink {
  const { path, hasEcho, turnaroundMs, silencesUntilLost } = configuration;
  const character = characterOf(configuration);
  const port = new RtuPort(serial, {
    path,
    ...silentIntervals(character),
    characterMs: characterTimeS(character) * 1000,
    hasEcho,
    turnaroundMs,
    nowMs,
  });
  const link = new ModbusLink(port, {
    label: path,
    silencesUntilLost,
    release: () => closeSerialPort(serial),
    quiet: (mostMs) => port.quiet(mostMs),
    heard: () => port.heard(),
  });
  serial.on('error', (error: Error) => void link.end(portFault(path, error)));
  serial.on('close', () => {
    void link.end(new DomainError('adapter.disconnected', `${path}: the port was closed.`));
  });
  return link;
}
