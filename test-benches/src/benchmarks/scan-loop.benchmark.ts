import { fileURLToPath } from 'node:url';
import { z } from 'zod';
import type { Benchmark } from './benchmark.types.js';
import { forkProgram, nextMessage } from './forked-program.js';

const serverProgram = fileURLToPath(new URL('./fast-modbus-server.js', import.meta.url));
const hostProgram = fileURLToPath(
  new URL('../../../orchestrator/dist/rig-host/free-run.js', import.meta.url),
);

const listeningSchema = z.object({ port: z.int() });
const outcomeSchema = z.object({ scansPerS: z.number(), bareLoopsPerS: z.number(), ratio: z.number() });

/** Enough to be past warm-up; rounds alternate between the two loops, so that both see the same machine. */
const order = { scans: 4000, rounds: 5 };

/** The whole scan of a rig host without its pace, against a loop that only reads and writes. */
export const scanLoop: Benchmark = {
  name: 'scan-loop',
  purpose: 'Scans per second of the whole loop against a bare read and write on the same server.',
  async run() {
    const server = forkProgram(serverProgram);
    const listening = nextMessage(server, 10_000);
    const host = forkProgram(hostProgram);
    try {
      const { port } = listeningSchema.parse(await listening);
      host.send({ host: '127.0.0.1', port, ...order });
      const outcome = outcomeSchema.parse(await nextMessage(host, 180_000));
      return {
        name: this.name,
        value: outcome.scansPerS,
        unit: 'scans/s',
        ratio: outcome.ratio,
        against: 'a bare modbus-serial loop of one read and one write',
      };
    } finally {
      host.kill();
      server.kill();
    }
  },
};
