import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { ExperimentContent, Role, Scenario } from '@cresthold/shared';
import { ApiClient, type Answer } from './api-client.js';
import { demoScenario, forkBurnerBench, type BenchProcess } from './bench-process.js';
import { ServerProcess } from './server-process.js';
import { until } from './until.js';

export const password = 'brackwater trial 7';

export const accounts = {
  administrator: ['administrator'],
  officer: ['safety-officer'],
  chief: ['safety-officer', 'test-engineer'],
  engineer: ['test-engineer'],
  technician: ['technician'],
  reader: ['reader'],
} as const satisfies Record<string, Role[]>;
export type Account = keyof typeof accounts;

/** A server and a burner bench as processes of their own, with nothing set up yet. */
export class Station {
  server!: ServerProcess;
  readonly clients = new Map<Account, ApiClient>();

  private constructor(
    readonly folder: string,
    readonly bench: BenchProcess,
    readonly scenario: Scenario,
  ) {}

  /** @param benchPort where the rig finds the bench; the bench's own port where it is left out */
  static async open(benchArgs: string[], benchPort?: (port: number) => Promise<number>): Promise<Station> {
    const folder = mkdtempSync(join(tmpdir(), 'cresthold-station-'));
    const bench = await forkBurnerBench(folder, benchArgs);
    const port = (await benchPort?.(bench.port)) ?? bench.port;
    const station = new Station(folder, bench, demoScenario(port));
    await station.startServer();
    return station;
  }

  get dataFolder(): string {
    return join(this.folder, 'data');
  }

  /** The one rig of the scenario, with its documents. */
  get entry() {
    const entry = this.scenario.rigs[0];
    if (!entry) throw new Error('The scenario has no rig.');
    return entry;
  }

  get rigId(): string {
    return this.entry.rig.id;
  }

  as(account: Account): ApiClient {
    const client = this.clients.get(account);
    if (!client) throw new Error(`Nobody is signed in as ${account}.`);
    return client;
  }

  async startServer(): Promise<void> {
    this.server = await ServerProcess.start(this.dataFolder);
  }

  /** Makes the first administrator with the printed code, then everybody else, and signs them in. */
  async makePeople(): Promise<void> {
    const { url } = this.server;
    const code = await this.server.setUpCode();
    const first = { code, account: 'administrator', title: 'Administrator', password };
    await new ApiClient(url).expect(201, 'POST', 'setup', first);
    const administrator = await ApiClient.signIn(url, 'administrator', password);
    for (const [account, roles] of Object.entries(accounts)) {
      if (account === 'administrator') continue;
      await administrator.expect(201, 'POST', 'users', { account, title: account, roles, password });
    }
    await this.signInAll();
  }

  /** Sessions hold a server's address: signs everybody in again after a restart. */
  async signInAll(): Promise<void> {
    for (const account of Object.keys(accounts) as Account[]) {
      this.clients.set(account, await ApiClient.signIn(this.server.url, account, password));
    }
  }

  async makeRig(): Promise<void> {
    await this.as('engineer').expect(201, 'POST', 'rigs', this.entry.rig);
    await this.untilPhase('idle');
  }

  /** Drafted by one and approved by another. */
  async approveEnvelope(): Promise<void> {
    const { content } = this.entry.envelope;
    const path = `rigs/${this.rigId}/envelopes`;
    const { body } = await this.as('engineer').expect(201, 'POST', path, { content });
    await this.as('engineer').expect(200, 'POST', `envelopes/${body.id}/submit`);
    const reason = 'Limits as commissioned.';
    await this.as('officer').reauthenticate(password);
    await this.as('officer').expect(200, 'POST', `envelopes/${body.id}/approve`, { reason });
  }

  /** @returns its id */
  async makeObjective(): Promise<string> {
    const content = this.entry.objectives[0]?.content;
    const request = { rigId: this.rigId, content };
    return (await this.as('engineer').expect(201, 'POST', 'objectives', request)).body.id;
  }

  /** @returns its id */
  async makeExperiment(content: ExperimentContent): Promise<string> {
    const request = { rigId: this.rigId, content };
    return (await this.as('engineer').expect(201, 'POST', 'experiments', request)).body.id;
  }

  async status() {
    return this.as('reader').get(`rigs/${this.rigId}/status`);
  }

  async untilPhase(phase: string, withinMs?: number) {
    let last: unknown;
    return until(
      `rig ${phase}`,
      async () => {
        last = await this.status();
        return (last as { phase: string }).phase === phase ? last : null;
      },
      withinMs,
    ).catch((error: Error) => {
      throw new Error(`${error.message} Last: ${JSON.stringify(last)}\n${this.server.lastLines(15)}`);
    });
  }

  /** Arms as soon as nothing forbids it: the burner lights a while after its heartbeat is seen. */
  async arm(account: Account, withinMs?: number): Promise<void> {
    let last: Answer | null = null;
    const isArmed = async () => {
      if ((await this.status()).phase === 'armed') return true;
      last = await this.as(account).call('POST', `rigs/${this.rigId}/arm`);
      return last.status === 200;
    };
    await until('the rig is armed', isArmed, withinMs, 200).catch((error: Error) => {
      throw new Error(`${error.message} Last: ${JSON.stringify(last?.body)}`);
    });
  }

  async close(): Promise<void> {
    await this.server?.end();
    await this.bench.end();
  }
}
