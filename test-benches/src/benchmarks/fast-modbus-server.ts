import { createServer } from 'node:net';
import jsmodbus from 'jsmodbus';

/**
 * A Modbus TCP server process for benchmarks, by a library that answers at once: that of the benches defers
 * every answer by a timer of 1 ms, and a benchmark on it would measure that timer. Sends its port by IPC.
 */
const registers = Buffer.alloc(2 * 1000);
const listener = createServer({ noDelay: true });
new jsmodbus.server.TCP(listener, { holding: registers });
listener.listen(0, '127.0.0.1', () => {
  const address = listener.address();
  if (typeof address === 'object' && address) process.send?.({ port: address.port });
});
process.once('disconnect', () => process.exit(0));
