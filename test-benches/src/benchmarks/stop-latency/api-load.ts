import { z } from 'zod';

const orderSchema = z.object({
  url: z.string(),
  cookie: z.string(),
  rigIds: z.array(z.string()).min(1),
  ratePerS: z.number(),
});

/** Asks the API at a steady rate, whatever becomes of the answers; says every second how many were good. */
process.once('message', (message) => {
  const { url, cookie, rigIds, ratePerS } = orderSchema.parse(message);
  const beganMs = performance.now();
  let sent = 0;
  let answered = 0;
  setInterval(() => {
    const due = Math.floor(((performance.now() - beganMs) / 1000) * ratePerS);
    for (; sent < due; sent += 1) void ask(`${url}/api/v1/rigs/${rigIds[sent % rigIds.length]}/status`);
  }, 5);
  setInterval(
    () => process.send?.({ answeredPerS: answered / ((performance.now() - beganMs) / 1000) }),
    1000,
  );

  async function ask(address: string): Promise<void> {
    const response = await fetch(address, { headers: { cookie } }).catch(() => null);
    await response?.arrayBuffer().catch(() => undefined);
    if (response?.ok === true) answered += 1;
  }
});
process.once('disconnect', () => process.exit(0));
