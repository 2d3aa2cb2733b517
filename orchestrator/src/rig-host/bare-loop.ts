import modbus from 'modbus-serial';
import { monotonicS } from './monotonic-clock.js';

const ModbusClient = modbus.default;

/** What the whole loop is measured against: one read and one write, and nothing else. */
export class BareLoop {
  private readonly client = new ModbusClient();

  async open(host: string, port: number): Promise<void> {
    await this.client.connectTCP(host, { port });
    this.client.setID(1);
    this.client.setTimeout(1000);
  }

  /** @returns how long it took, s */
  async run(loops: number): Promise<number> {
    const startS = monotonicS();
    for (let i = 0; i < loops; i += 1) {
      await this.client.readHoldingRegisters(0, 8);
      await this.client.writeRegisters(0, [i % 1000]);
    }
    return monotonicS() - startS;
  }

  close(): Promise<void> {
    return new Promise((resolve) => this.client.close(() => resolve()));
  }
}
