import type { SerialPortListing } from '@cresthold/adapters';

/** Where the list of serial ports comes from: the operating system, or a test. */
export abstract class SerialPortsPort {
  abstract list(): Promise<SerialPortListing[]>;
}
