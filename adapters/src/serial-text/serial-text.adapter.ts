import { performance } from 'node:perf_hooks';
import { DomainError } from '@cresthold/shared';
import type { Adapter } from '../contract.js';
import { parseOrMisconfigured } from '../parse-or-misconfigured.js';
import { openSerialPort, type SerialPortMaker } from '../serial/open-serial-port.js';
import { estimateScan } from './estimate-scan.js';
import { greetDevice } from './greet-device.js';
import { type SerialTextAddress, serialTextAddressSchema } from './serial-text-address.schema.js';
import type { SerialTextConfiguration } from './serial-text-configuration.js';
import { serialTextConfigurationSchema } from './serial-text-configuration.schema.js';
import { SerialTextSession } from './serial-text-session.js';
import { parseTextAddress } from './text-address.js';
import { TextLink } from './text-link.js';

const nowMs = (): number => performance.now();

/**
 * ASCII instruments on a serial port: commands and replies are lines of text, described by the address of each
 * channel. A port that goes away is lost at once; a device that falls silent after `silencesUntilLost` commands.
 *
 * @param makePort for tests
 */
export function makeSerialTextAdapter(
  makePort?: SerialPortMaker,
): Adapter<SerialTextConfiguration, SerialTextAddress> {
  return {
    manifest: {
      id: 'serial-text',
      title: 'Serial text (ASCII instruments)',
      contract: '^1.1.0',
      configurationSchema: serialTextConfigurationSchema,
      addressSchema: serialTextAddressSchema,
    },

    async open(configuration, signal) {
      const settings = parseOrMisconfigured(serialTextConfigurationSchema, configuration);
      const deadlineMs = nowMs() + settings.openTimeoutMs;
      const port = await openSerialPort(settings, signal, makePort);
      const link = new TextLink(port, settings, nowMs);
      const onAbort = (): void => {
        void link.end(new DomainError('adapter.cancelled', 'Opening was cancelled.'));
      };
      signal.addEventListener('abort', onAbort);
      if (signal.aborted) onAbort();
      const fault = await greetDevice(link, settings, deadlineMs);
      signal.removeEventListener('abort', onAbort);
      if (!fault) return new SerialTextSession(link, settings, nowMs);
      await link.end(fault);
      throw fault;
    },

    estimate(configuration, addresses) {
      const settings = parseOrMisconfigured(serialTextConfigurationSchema, configuration);
      return estimateScan(
        settings,
        addresses.map((address, index) => parseTextAddress(address, `addresses[${index}]`)),
      );
    },
  };
}

export const serialTextAdapter = makeSerialTextAdapter();
