import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, sep } from 'node:path';
import type { NestExpressApplication } from '@nestjs/platform-express';
import { Test } from '@nestjs/testing';
import type { Role } from '@cresthold/shared';
import request from 'supertest';
import { AppModule } from '../../src/app.module.js';
import { hashPassword } from '../../src/auth/password-hash.js';
import { sessionCookieName } from '../../src/auth/session-cookie.js';
import { SessionsService } from '../../src/auth/sessions.service.js';
import type { Config } from '../../src/config/config.schema.js';
import { insertRow } from '../../src/database/rows.js';
import { TransactionQueue } from '../../src/database/transaction-queue.js';
import { setUpHttp } from '../../src/http/set-up-http.js';
import { RigHostsPort } from '../../src/rigs/rig-hosts.port.js';
import { UserEntity } from '../../src/users/entities/user.entity.js';
import { FakeRigHosts } from './fake-rig-hosts.js';

/** Sends requests, as nobody or as whoever is signed in. */
export type Client = ReturnType<typeof request.agent>;

/** Password of every account that `addUser` makes. */
export const testPassword = 'a long enough one';

const passwordHash = hashPassword(testPassword);

/** A whole server on a database file of its own, with rig hosts that only remember what they were asked. */
export class TestServer {
  constructor(
    readonly app: NestExpressApplication,
    readonly config: Config,
    readonly hosts: FakeRigHosts,
  ) {}

  /** A client that is not signed in. */
  get anyone(): Client {
    return request(this.app.getHttpServer());
  }

  /** A client signed in as an account with the given roles; made where it does not exist yet. */
  async as(account: string, ...roles: Role[]): Promise<Client> {
    const users = this.app.get(TransactionQueue);
    const sessions = this.app.get(SessionsService);
    await users.transaction(async (manager) => {
      if (!(await manager.existsBy(UserEntity, { account }))) {
        await insertRow(manager, UserEntity, await userRow(account, roles));
      }
    });
    const agent = request.agent(this.app.getHttpServer());
    const { id } = await sessions.begin(account, { userAgent: 'test', address: '127.0.0.1' });
    // As if the password had just been given again; the tests of that sign in by themselves.
    const { token } = await sessions.elevate(id);
    agent.set('Cookie', `${sessionCookieName}=${token}`);
    return agent;
  }

  async close(): Promise<void> {
    await this.app.close();
    rmSync(this.config.dataFolder, { recursive: true, force: true });
  }
}

async function userRow(account: string, roles: Role[]): Promise<UserEntity> {
  return {
    account,
    title: account,
    roles,
    rigLimits: [],
    isPasswordShort: false,
    passwordHash: await passwordHash,
    isEnabled: true,
    sessionGeneration: 1,
    createdAt: new Date().toISOString(),
  };
}

/** Starts a server for one test file; it is not listening, supertest opens a port of its own. */
export async function createTestServer(overrides: Partial<Config> = {}): Promise<TestServer> {
  const config = { ...testConfig(), ...overrides };
  if (!config.dataFolder.startsWith(`${tmpdir()}${sep}`)) throw new Error('Tests keep to temporary folders.');
  const hosts = new FakeRigHosts();
  const module = await Test.createTestingModule({ imports: [AppModule.register(config)] })
    .overrideProvider(RigHostsPort)
    .useValue(hosts)
    .compile();
  const app = module.createNestApplication<NestExpressApplication>({
    forceCloseConnections: true,
    bodyParser: false,
    logger: false,
  });
  setUpHttp(app, config);
  await app.init();
  return new TestServer(app, config, hosts);
}

/** A configuration whose every setting is the default, on a data folder. */
export function testConfig(dataFolder = mkdtempSync(join(tmpdir(), 'cresthold-test-'))): Config {
  return {
    dataFolder,
    port: 0,
    host: '127.0.0.1',
    consoleFolder: join(dataFolder, 'no-console'),
    isHttps: false,
    proxies: 0,
    mail: null,
    sessionIdleS: 1800,
    sessionMaxS: 12 * 3600,
    isSecondFactorNeeded: false,
    station: 'Brackwater Test Station',
    plugIns: [],
  };
}
