import { once } from 'node:events';
import type { AddressInfo, Server } from 'node:net';
import { ServerTCP, type IServiceVector } from 'modbus-serial';

/** A real Modbus TCP device with forty holding registers, by a library that the product does not answer with. */
export class ModbusDevice {
  readonly words = new Uint16Array(40);
  /** Every write it accepted, oldest first. */
  readonly writes: { address: number; value: number }[] = [];
  /** Registers that it answers by exception 2 (illegal data address). */
  readonly failing = new Set<number>();
  private constructor(
    private readonly face: ServerTCP,
    readonly port: number,
  ) {}

  static async start(port = 0): Promise<ModbusDevice> {
    let device: ModbusDevice | null = null;
    const self = (): ModbusDevice => {
      if (device === null) throw new Error('not started');
      return device;
    };
    const vector: IServiceVector = {
      getMultipleHoldingRegisters: (address: number, count: number) => self().read(address, count),
      getHoldingRegister: (address: number) => self().read(address, 1)[0] ?? 0,
      setRegister: (address: number, value: number) => self().write(address, value),
      setRegisterArray: (address: number, values: number[]) =>
        values.forEach((value, i) => self().write(address + i, value)),
    };
    // The library takes the number 0 for "not given"; as text it reaches the socket as 0.
    const face = new ServerTCP(vector, { host: '127.0.0.1', port: String(port) as unknown as number });
    face.on('socketError', () => undefined);
    await once(face, 'initialized');
    const { port: chosen } = socketOf(face).address() as AddressInfo;
    device = new ModbusDevice(face, chosen);
    device.setFloat(0, 4);
    device.setFloat(2, 180);
    return device;
  }

  setFloat(address: number, value: number): void {
    const bytes = Buffer.alloc(4);
    bytes.writeFloatBE(value);
    this.words[address] = bytes.readUInt16BE(0);
    this.words[address + 1] = bytes.readUInt16BE(2);
  }

  /** Air trim as the device holds it; the wire carries hundredths. */
  get airTrim(): number {
    return (((this.words[4] ?? 0) << 16) >> 16) / 100;
  }

  /** Values of the air trim in the order in which they were written. */
  get airTrimWrites(): number[] {
    return this.writes.filter((w) => w.address === 4).map((w) => ((w.value << 16) >> 16) / 100);
  }

  /** Cuts the wire: nothing listens any more and open sockets die. */
  async cut(): Promise<void> {
    if (!socketOf(this.face).listening) return;
    const closed = once(socketOf(this.face), 'close');
    this.face.close(() => undefined);
    this.face.socks.forEach((_, socket) => socket.destroy());
    await closed;
  }

  private read(address: number, count: number): number[] {
    for (let i = address; i < address + count; i += 1) this.refuseFailing(i);
    return [...this.words.subarray(address, address + count)];
  }

  private write(address: number, value: number): void {
    this.refuseFailing(address);
    this.words[address] = value;
    this.writes.push({ address, value });
  }

  private refuseFailing(address: number): void {
    if (this.failing.has(address))
      throw Object.assign(new Error('illegal data address'), { modbusErrorCode: 2 });
  }
}

const socketOf = (face: ServerTCP): Server => (face as unknown as { _server: Server })._server;
