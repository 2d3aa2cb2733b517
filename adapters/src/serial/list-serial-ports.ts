import { readdir, realpath } from 'node:fs/promises';
import { join } from 'node:path';
import { SerialPort } from 'serialport';

/** What the operating system knows of one serial port; null where it does not say. */
export interface SerialPortListing {
  path: string;
  /** Path that stays the same wherever the device is plugged in, below /dev/serial/by-id. */
  stablePath: string | null;
  manufacturer: string | null;
  serialNumber: string | null;
  /** USB vendor, four hexadecimal digits. */
  vendorId: string | null;
  /** USB product, four hexadecimal digits. */
  productId: string | null;
}

/** A port as the binding tells of it. */
export interface KnownPort {
  path: string;
  manufacturer?: string | undefined;
  serialNumber?: string | undefined;
  vendorId?: string | undefined;
  productId?: string | undefined;
}

/** Where the list comes from; the operating system, or a fake in tests. */
export interface SerialPortSource {
  /** Rejects where the operating system's own list cannot be had. */
  list(): Promise<readonly KnownPort[]>;
  /** Folder of the device files, `/dev`. */
  readonly deviceFolder: string;
}

const systemSource: SerialPortSource = { list: () => SerialPort.list(), deviceFolder: '/dev' };

/** Names of device files that are serial ports with a wire behind them, not terminals. */
const portName = /^(tty(S|USB|ACM|AMA|MFD|WCH|XRUSB|O)\d+|rfcomm\d+)$/;

/**
 * The serial ports that the operating system knows, by path. Pseudo-terminals are not among them; one can be used
 * all the same by typing its path. On a system without a device manager the names come from the device files alone.
 */
export async function listSerialPorts(source: SerialPortSource = systemSource): Promise<SerialPortListing[]> {
  const [ports, stablePaths] = await Promise.all([knownPorts(source), stablePathsOf(source.deviceFolder)]);
  return ports
    .map(({ path, manufacturer, serialNumber, vendorId, productId }) => ({
      path,
      stablePath: stablePaths.get(path) ?? null,
      manufacturer: manufacturer ?? null,
      serialNumber: serialNumber ?? null,
      vendorId: vendorId ?? null,
      productId: productId ?? null,
    }))
    .sort((a, b) => a.path.localeCompare(b.path, 'en', { numeric: true }));
}

async function knownPorts(source: SerialPortSource): Promise<readonly KnownPort[]> {
  try {
    return await source.list();
  } catch {
    // No device manager here (a container, for one): the device files still tell which ports there are.
    const names = await namesIn(source.deviceFolder);
    return names
      .filter((name) => portName.test(name))
      .map((name) => ({ path: join(source.deviceFolder, name) }));
  }
}

async function stablePathsOf(deviceFolder: string): Promise<Map<string, string>> {
  const folder = join(deviceFolder, 'serial', 'by-id');
  const stable = new Map<string, string>();
  for (const name of await namesIn(folder)) {
    const link = join(folder, name);
    // A link whose device has just gone leads nowhere.
    const target = await realpath(link).catch(() => null);
    if (target !== null) stable.set(target, link);
  }
  return stable;
}

async function namesIn(folder: string): Promise<string[]> {
  return readdir(folder).catch(() => []);
}
