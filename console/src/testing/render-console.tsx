import { act, render } from '@testing-library/react';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import type { FromLive } from '@cresthold/shared';
import { createQueryClient } from '../api/index.js';
import { Providers } from '../app/providers.js';
import { routes } from '../app/routes.js';
import { LiveHub } from '../live/index.js';

interface OpenSocket {
  send: () => void;
  close: () => void;
  onopen: (() => void) | null;
  onclose: (() => void) | null;
  onmessage: ((event: { data: unknown }) => void) | null;
}

/** The whole console at one address, with a live link in the test's hands. */
export function renderConsole(path: string) {
  const sockets: OpenSocket[] = [];
  const hub = new LiveHub({
    connect: () => {
      const socket: OpenSocket = { send() {}, close() {}, onopen: null, onclose: null, onmessage: null };
      sockets.push(socket);
      return socket;
    },
    after: () => () => undefined,
    random: () => 0,
    requestFrame: (callback) => queueMicrotask(callback),
    nowMs: () => Date.now(),
  });
  const router = createMemoryRouter(routes, { initialEntries: [path] });
  render(
    <Providers queryClient={createQueryClient()} hub={hub}>
      <RouterProvider router={router} />
    </Providers>,
  );
  const onSocket = (use: (socket: OpenSocket) => void) =>
    act(async () => {
      const socket = sockets.at(-1);
      if (!socket) throw new Error('The console has not opened its live link.');
      use(socket);
      await Promise.resolve();
    });
  return {
    router,
    linkUp: () => onSocket((socket) => socket.onopen?.()),
    linkLost: () => onSocket((socket) => socket.onclose?.()),
    say: (message: FromLive) => onSocket((socket) => socket.onmessage?.({ data: JSON.stringify(message) })),
  };
}
