import { createServer } from 'node:net';
import jsmodbus from 'jsmodbus';

/**
 * Eight benches in one process: each a Modbus TCP server of its own whose log says when the actuator's register
 * took which value, by the monotonic clock that all processes of this computer share. Sends its ports by IPC.
 */
const benches = 8;

const ports: number[] = [];
for (let bench = 0; bench < benches; bench += 1) {
  const registers = Buffer.alloc(2 * 16);
  const listener = createServer({ noDelay: true });
  const server = new jsmodbus.server.TCP(listener, { holding: registers });
  let last = 0;
  const note = () => {
    const atNs = process.hrtime.bigint();
    const value = registers.readInt16BE(0);
    if (value === last) return;
    last = value;
    process.send?.({ bench, value, atNs: String(atNs) });
  };
  server.on('postWriteSingleRegister', note);
  server.on('postWriteMultipleRegisters', note);
  listener.listen(0, '127.0.0.1', () => {
    const address = listener.address();
    if (typeof address === 'object' && address) ports[bench] = address.port;
    if (Object.keys(ports).length === benches) process.send?.({ ports });
  });
}
process.once('disconnect', () => process.exit(0));
