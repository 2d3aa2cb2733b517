import { createServer } from 'node:net';

/** @returns why it cannot be opened, or null */
function tryPort(port) {
  return new Promise((done) => {
    const probe = createServer();
    probe.once('error', done);
    probe.listen(port, '127.0.0.1', () => probe.close(() => done(null)));
  });
}

export const isFreePort = async (port) => (await tryPort(port)) === null;

/** @throws Error that says what to do where the port is in use */
export async function requireFreePort(port, what, option) {
  const error = await tryPort(port);
  if (error === null) return;
  const why = error.code === 'EADDRINUSE' ? 'is in use' : `cannot be opened (${error.code})`;
  throw new Error(
    `Port ${port} for the ${what} ${why}. End what uses it (perhaps another demo), or give another port with ${option}.`,
  );
}
