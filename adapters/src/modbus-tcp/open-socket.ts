import { once } from 'node:events';
import { Socket } from 'node:net';
import { DomainError } from '@cresthold/shared';

export interface SocketTarget {
  host: string;
  port: number;
  /** Longest time for name look-up and connection together. */
  timeoutMs: number;
}

/**
 * Opens a TCP connection with TCP_NODELAY. A failed or aborted opening leaves nothing open.
 *
 * @throws adapter.cancelled, adapter.timeout, adapter.disconnected
 */
export async function openSocket(target: SocketTarget, signal: AbortSignal): Promise<Socket> {
  if (signal.aborted) throw new DomainError('adapter.cancelled', 'Opening was cancelled.');
  const socket = new Socket();
  try {
    await connected(socket, target, signal);
    return socket;
  } catch (error) {
    await destroySocket(socket);
    throw error;
  }
}

/** Resolves when the operating system has the socket back. */
export async function destroySocket(socket: Socket): Promise<void> {
  socket.on('error', () => undefined);
  if (socket.closed) return;
  const closed = once(socket, 'close');
  socket.destroy();
  await closed;
}

function connected(socket: Socket, target: SocketTarget, signal: AbortSignal): Promise<void> {
  const { host, port, timeoutMs } = target;
  return new Promise((resolve, reject) => {
    const timer = setTimeout(() => {
      finish(new DomainError('adapter.timeout', `${host}:${port}: no connection within ${timeoutMs} ms.`));
    }, timeoutMs);
    const onAbort = (): void => {
      finish(new DomainError('adapter.cancelled', 'Opening was cancelled.'));
    };
    const onError = (error: NodeJS.ErrnoException): void => {
      finish(connectionFault(target, error));
    };
    const onConnect = (): void => {
      finish(null);
    };
    const finish = (fault: DomainError | null): void => {
      clearTimeout(timer);
      signal.removeEventListener('abort', onAbort);
      socket.off('error', onError).off('connect', onConnect);
      if (fault) reject(fault);
      else resolve();
    };
    signal.addEventListener('abort', onAbort);
    socket.on('error', onError).on('connect', onConnect);
    socket.connect({ host, port, noDelay: true });
  });
}

const reasons: Readonly<Record<string, string>> = {
  ENOTFOUND: 'no such host is known: check the host name',
  EAI_AGAIN: 'the host name cannot be looked up now: check the host name and the network',
  ECONNREFUSED: 'the host refuses the connection: check the port and that the device is on',
  EHOSTUNREACH: 'the host cannot be reached: check network and cable',
  ENETUNREACH: 'the network cannot be reached: check network and cable',
  ETIMEDOUT: 'the host does not answer: check power and cable',
  ECONNRESET: 'the device ended the connection',
};

/** What a socket error means, with host and port. */
export function connectionFault(
  { host, port }: Pick<SocketTarget, 'host' | 'port'>,
  error: NodeJS.ErrnoException,
): DomainError {
  const code = error.code ?? 'unknown error';
  const reason = reasons[code] ?? 'the connection failed';
  return new DomainError('adapter.disconnected', `${host}:${port}: ${reason} (${code}).`, [], {
    cause: error,
  });
}
