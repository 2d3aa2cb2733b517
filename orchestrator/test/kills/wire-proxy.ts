import { once } from 'node:events';
import { connect, createServer, type AddressInfo, type Server, type Socket } from 'node:net';

type State = 'passing' | 'frozen' | 'cut';

/** The wire between rig host and bench, which a test can cut: by silence, or by a closed connection. */
export class WireProxy {
  private state: State = 'passing';
  private readonly pairs = new Set<readonly [Socket, Socket]>();

  private constructor(
    private readonly server: Server,
    private readonly benchPort: number,
  ) {
    server.on('connection', (socket) => this.accept(socket));
  }

  static async open(benchPort: number): Promise<WireProxy> {
    const server = createServer();
    server.listen(0, '127.0.0.1');
    await once(server, 'listening');
    return new WireProxy(server, benchPort);
  }

  get port(): number {
    return (this.server.address() as AddressInfo).port;
  }

  /** The cable is out: connections stay, nothing passes any more. */
  freeze(): void {
    this.state = 'frozen';
    for (const [near, far] of this.pairs) {
      near.pause();
      far.pause();
    }
  }

  /** The far end is gone: every connection is reset, new ones are closed at once. */
  cut(): void {
    this.state = 'cut';
    this.dropAll();
  }

  /** The cable is in again; what was frozen is lost. */
  restore(): void {
    this.state = 'passing';
    this.dropAll();
  }

  close(): void {
    this.dropAll();
    this.server.close();
  }

  private accept(near: Socket): void {
    near.on('error', () => near.destroy());
    if (this.state === 'cut') {
      near.destroy();
      return;
    }
    const far = connect(this.benchPort, '127.0.0.1');
    far.on('error', () => far.destroy());
    const pair = [near, far] as const;
    this.pairs.add(pair);
    for (const socket of pair) {
      socket.setNoDelay(true);
      socket.on('close', () => this.drop(pair));
    }
    near.on('data', (data) => far.write(data));
    far.on('data', (data) => near.write(data));
    if (this.state === 'frozen') near.pause();
  }

  private drop(pair: readonly [Socket, Socket]): void {
    this.pairs.delete(pair);
    for (const socket of pair) socket.destroy();
  }

  private dropAll(): void {
    for (const pair of [...this.pairs]) this.drop(pair);
  }
}
