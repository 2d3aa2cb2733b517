import { join } from 'node:path';
import type { FromHost, Rig } from '@cresthold/shared';
import { RigHostProcess, type RigHostOwner } from '../../src/rig-hosts/rig-host-process.js';
import type { HostDeath } from '../../src/rig-hosts/supervision/host-life.js';
import type { SupervisionTiming } from '../../src/rig-hosts/supervision/supervision-options.js';

const timing: SupervisionTiming = {
  readyMs: 4_000,
  requestMs: 400,
  configureMs: 1_000,
  silenceMs: 600,
  shutDownMs: 500,
  aliveEveryMs: 100,
  messagesPerSMax: 300,
};
const policy = { restartsMax: 2, windowMs: 60_000, firstDelayMs: 10, delayMaxMs: 100 };

class RecordingOwner implements RigHostOwner {
  readonly deaths: HostDeath[] = [];
  readonly logs: string[] = [];
  readonly messages: FromHost[] = [];
  readonly pids: number[] = [];

  constructor(private readonly fixture: string) {}

  prepare() {
    const file = join(__dirname, 'fixtures', `${this.fixture}.mjs`);
    return Promise.resolve({ file, args: [], outputFile: null });
  }

  onForked(pid: number) {
    this.pids.push(pid);
  }

  configuration() {
    const rig: Rig = {
      id: 'rig-1',
      title: 'Rig 1',
      description: '',
      periodMs: 50,
      isBench: false,
      connections: [],
      channels: [],
    };
    return Promise.resolve({
      type: 'configure' as const,
      rig,
      envelope: null,
      trip: null,
      isLockedOut: false,
    });
  }

  onMessage(message: FromHost) {
    this.messages.push(message);
  }

  onDeath(death: HostDeath) {
    this.deaths.push(death);
    return Promise.resolve();
  }

  onLog(_level: string, text: string) {
    this.logs.push(text);
  }
}

const open: RigHostProcess[] = [];

function supervise(fixture: string) {
  const owner = new RecordingOwner(fixture);
  const host = new RigHostProcess(owner, timing, policy);
  open.push(host);
  return { owner, host };
}

async function until(what: () => boolean, withinMs = 8_000) {
  const endMs = performance.now() + withinMs;
  while (!what()) {
    if (performance.now() > endMs) throw new Error(`Not so within ${withinMs} ms: ${String(what)}`);
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
}

function isGone(pid: number | undefined): boolean {
  try {
    process.kill(pid ?? 0, 0);
    return false;
  } catch {
    return true;
  }
}

afterEach(async () => {
  await Promise.all(open.splice(0).map((host) => host.stop()));
});

describe('a rig host in good health', () => {
  it('is configured, is heard, and ends as asked without a death being reported', async () => {
    const { owner, host } = supervise('healthy');
    await host.start();
    expect(host.state.name).toBe('up');
    await until(() => owner.messages.some((message) => message.type === 'status'));
    await host.stop();
    expect(owner.deaths).toEqual([]);
    expect(isGone(owner.pids[0])).toBe(true);
  });

  it('passes on what the host answers', async () => {
    const { host } = supervise('healthy');
    await host.start();
    const move = host.request({ type: 'move', channel: 'airTrim', value: 1, by: 'engineer', hold: null });
    await expect(move).rejects.toMatchObject({ code: 'rig.not-armed', kind: 'not-allowed-now' });
    await expect(host.request({ type: 'disarm', by: 'engineer' })).resolves.toBeUndefined();
  });

  it('fails a request that is not answered, and stays up', async () => {
    const { host } = supervise('healthy');
    await host.start();
    await expect(host.request({ type: 'arm', by: 'engineer' })).rejects.toMatchObject({
      code: 'host.timeout',
    });
    expect(host.state.name).toBe('up');
  });
});

describe('a rig host that is not READY', () => {
  it.each([
    ['dies', 'before-ready', /exit code 1/],
    ['is silent', 'never-ready', /not READY within 4000 ms/],
  ])('and %s is not begun again', async (_how, fixture, because) => {
    const { owner, host } = supervise(fixture);
    await expect(host.start()).rejects.toMatchObject({ code: 'host.unavailable' });
    expect(host.state).toMatchObject({ name: 'failed', because: expect.stringMatching(because) });
    expect(owner.pids).toHaveLength(1);
    await until(() => isGone(owner.pids[0]));
    await expect(host.request({ type: 'arm', by: 'engineer' })).rejects.toMatchObject({
      code: 'host.unavailable',
    });
  });
});

describe('a rig host that dies after READY', () => {
  it.each([
    ['throws', 'throws-later', 'crashed'],
    ['ends with code 0', 'exits-zero', 'crashed'],
    ['hangs', 'hangs', 'hung'],
    ['floods', 'floods', 'flooded'],
    ['says only what is no message', 'babbles', 'hung'],
  ])('because it %s is begun again until the budget is spent', async (_how, fixture, kind) => {
    const { owner, host } = supervise(fixture);
    await host.start();
    await until(() => host.state.name === 'failed', 20_000);
    expect(owner.deaths.map((death) => death.kind)).toEqual([kind, kind, kind]);
    expect(owner.pids).toHaveLength(1 + policy.restartsMax);
    expect(owner.pids.every(isGone)).toBe(true);
  });

  it('fails the requests that were waiting', async () => {
    const { owner, host } = supervise('healthy');
    await host.start();
    const waiting = host.request({ type: 'arm', by: 'engineer' });
    process.kill(owner.pids[0] ?? 0, 'SIGKILL');
    await expect(waiting).rejects.toMatchObject({ code: 'host.unavailable' });
    await until(() => host.state.name === 'up');
    expect(owner.deaths).toMatchObject([{ kind: 'crashed', signal: 'SIGKILL' }]);
  });
});

describe('a rig host that ignores stop', () => {
  it('is ended by force within the bound', async () => {
    const { owner, host } = supervise('ignores-stop');
    await host.start();
    await host.stop();
    expect(isGone(owner.pids[0])).toBe(true);
    expect(owner.logs).toContainEqual(expect.stringMatching(/did not end within 500 ms/));
  });
});
