import type { IncomingMessage, Server } from 'node:http';
import type { Duplex } from 'node:stream';
import {
  Inject,
  Injectable,
  Logger,
  Optional,
  type OnApplicationBootstrap,
  type OnModuleDestroy,
} from '@nestjs/common';
import { HttpAdapterHost } from '@nestjs/core';
import type { FromLive } from '@cresthold/shared';
import { WebSocketServer, type WebSocket } from 'ws';
import { rigScopeOf, type RigScope } from '../auth/rig-scope.js';
import { SessionsService } from '../auth/sessions.service.js';
import type { SignedInUser } from '../auth/signed-in-user.js';
import { apiPrefix } from '../http/api-prefix.js';
import { isFromHere } from '../http/same-origin.js';
import { RigHostsService } from '../rig-hosts/rig-hosts.service.js';
import { LiveClient } from './live-client.js';
import { LiveHub } from './live-hub.js';

export const livePath = `/${apiPrefix}/live`;

/** Between two looks at every socket: does it still answer, is its session still good? */
export const LIVE_CARE_EVERY_MS = Symbol('live-care-every-ms');
const defaultCareEveryMs = 20_000;
const messageBytesMax = 16 * 1024;
/** Close code of RFC 6455, section 7.4.2 (private use): the session has ended, sign in again. */
const sessionEndedCode = 4401;

/** The WebSocket end of the API: authenticated at the handshake, looked after while it is open. */
@Injectable()
export class LiveServer implements OnApplicationBootstrap, OnModuleDestroy {
  private readonly logger = new Logger(LiveServer.name);
  private readonly sockets = new WebSocketServer({ noServer: true, maxPayload: messageBytesMax });
  private timer: NodeJS.Timeout | null = null;

  constructor(
    private readonly adapterHost: HttpAdapterHost,
    private readonly sessions: SessionsService,
    private readonly hosts: RigHostsService,
    private readonly hub: LiveHub,
    @Optional() @Inject(LIVE_CARE_EVERY_MS) private readonly careEveryMs = defaultCareEveryMs,
  ) {}

  onApplicationBootstrap(): void {
    const server = this.adapterHost.httpAdapter.getHttpServer() as Server;
    server.on('upgrade', (request: IncomingMessage, socket: Duplex, head: Buffer) => {
      this.upgrade(request, socket, head).catch((error: unknown) => {
        this.logger.error('A live connection could not be made.', error);
        socket.destroy();
      });
    });
    this.timer = setInterval(() => void this.care(), this.careEveryMs);
  }

  onModuleDestroy(): void {
    if (this.timer) clearInterval(this.timer);
    for (const socket of this.sockets.clients) socket.terminate();
    this.sockets.close();
  }

  private async upgrade(request: IncomingMessage, socket: Duplex, head: Buffer): Promise<void> {
    socket.on('error', () => socket.destroy());
    if (new URL(request.url ?? '/', 'http://localhost').pathname !== livePath) {
      return refuse(socket, '404 Not Found');
    }
    const { cookie } = request.headers;
    const isOurPage = isFromHere({ origin: request.headers.origin, host: request.headers.host });
    const session = isOurPage ? await this.sessions.ofCookieHeader(cookie) : null;
    if (session === null || session.isIdle) return refuse(socket, '401 Unauthorized');
    this.sockets.handleUpgrade(request, socket, head, (opened) => {
      this.open(opened, session.user).catch(() => opened.terminate());
    });
  }

  private async open(socket: WebSocket, user: SignedInUser): Promise<void> {
    const client = new LiveClient(socket, user.sessionId, scopeOf(user));
    socket.on('close', () => this.hub.remove(client));
    this.hub.add(client);
    for (const status of await this.hosts.statuses()) {
      if (!client.mayHearOf(status.rigId)) continue;
      client.send(JSON.stringify({ type: 'rig-status', status } satisfies FromLive));
    }
  }

  /** A reader that does not answer, or whose session has ended since, is let go. */
  private async care(): Promise<void> {
    for (const client of this.hub.all()) {
      if (!client.ping()) continue;
      const session = await this.sessions.ofId(client.sessionId).catch(() => null);
      if (session === null || session.isIdle) {
        client.close(sessionEndedCode, 'The session has ended: sign in again.');
      } else client.scope = scopeOf(session.user);
    }
  }
}

/** Whoever is signed in may listen, to the rigs that any of his roles reaches. */
function scopeOf(user: SignedInUser): RigScope {
  return rigScopeOf(user, ['signed-in']);
}

function refuse(socket: Duplex, status: string): void {
  socket.end(`HTTP/1.1 ${status}\r\nConnection: close\r\nContent-Length: 0\r\n\r\n`);
}
