import { EventEmitter } from 'node:events';
import type { RigStatus, Telemetry } from '@cresthold/shared';
import type { WebSocket } from 'ws';
import { LiveClient } from '../../src/live/live-client.js';
import { LiveHub } from '../../src/live/live-hub.js';
import { statusWithoutHost } from '../../src/rig-hosts/offline-status.js';

/** A socket whose reader can be made slow: what is not read counts as buffered. */
class SocketDouble extends EventEmitter {
  bufferedAmount = 0;
  readonly sent: string[] = [];
  isTerminated = false;
  pings = 0;

  send(text: string) {
    this.sent.push(text);
  }

  ping() {
    this.pings += 1;
  }

  terminate() {
    this.isTerminated = true;
  }

  receive(message: unknown) {
    this.emit('message', Buffer.from(typeof message === 'string' ? message : JSON.stringify(message)), false);
  }
}

function connect(hub: LiveHub) {
  const socket = new SocketDouble();
  const client = new LiveClient(socket as unknown as WebSocket, 'session', null);
  hub.add(client);
  return { socket, client };
}

const status: RigStatus = statusWithoutHost('rig-1', null, false, 'The rig host is starting.');
const telemetry: Telemetry = { rigId: 'rig-1', runId: null, sequence: 1, columns: [], rows: [] };

describe('a reader of the live connection', () => {
  it('hears the status of every rig unasked, telemetry only where it subscribed', () => {
    const hub = new LiveHub();
    const { socket } = connect(hub);
    hub.toAll(status.rigId, { type: 'rig-status', status });
    hub.telemetry(telemetry);
    expect(socket.sent.map((text) => JSON.parse(text).type)).toEqual(['rig-status']);
    socket.receive({ type: 'subscribe', rigId: 'rig-1' });
    hub.telemetry(telemetry);
    hub.telemetry({ ...telemetry, rigId: 'rig-2' });
    expect(socket.sent.map((text) => JSON.parse(text).type)).toEqual(['rig-status', 'telemetry']);
    socket.receive({ type: 'unsubscribe', rigId: 'rig-1' });
    hub.telemetry(telemetry);
    expect(socket.sent).toHaveLength(2);
  });

  it.each(['no JSON', '{"type":"shout"}', '{"type":"subscribe"}'])(
    'is told that %s is no message',
    (text) => {
      const { socket } = connect(new LiveHub());
      socket.receive(text);
      expect(socket.sent.map((sent) => JSON.parse(sent).type)).toEqual(['error']);
    },
  );

  it('loses telemetry when it is slow, but no status and no event', () => {
    const hub = new LiveHub();
    const { socket } = connect(hub);
    socket.receive({ type: 'subscribe', rigId: 'rig-1' });
    socket.bufferedAmount = 1024 * 1024;
    hub.telemetry(telemetry);
    expect(socket.sent).toEqual([]);
    hub.toAll(status.rigId, { type: 'rig-status', status });
    hub.toSubscribers('rig-1', { type: 'run-changed', runId: 'r', status: 'running', verdict: null });
    expect(socket.sent.map((text) => JSON.parse(text).type)).toEqual(['rig-status', 'run-changed']);
    expect(socket.isTerminated).toBe(false);
  });

  it('is disconnected when it is too slow even for those', () => {
    const hub = new LiveHub();
    const { socket } = connect(hub);
    socket.bufferedAmount = 5 * 1024 * 1024;
    hub.toAll(status.rigId, { type: 'rig-status', status });
    expect(socket.sent).toEqual([]);
    expect(socket.isTerminated).toBe(true);
  });

  it('is let go when it did not answer the ping before', () => {
    const { socket, client } = connect(new LiveHub());
    expect(client.ping()).toBe(true);
    socket.emit('pong');
    expect(client.ping()).toBe(true);
    expect(client.ping()).toBe(false);
    expect(socket.isTerminated).toBe(true);
  });
});
