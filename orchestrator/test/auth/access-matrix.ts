import { roles, type Role } from '@cresthold/shared';
import { DataSource } from 'typeorm';
import { accessExtension, emergencyExtension, type Access } from '../../src/auth/access.decorator.js';
import { openApiDocument } from '../../src/http/open-api.js';
import { RunRecords } from '../../src/recordings/run-records.service.js';
import { RigLockoutEntity } from '../../src/rigs/entities/rig-lockout.entity.js';
import type { Client, TestServer } from '../server/create-test-server.js';
import { envelopeInput, experimentInput, objectiveInput, rigInput } from '../server/documents.js';

const methods = ['get', 'post', 'put', 'patch', 'delete'] as const;

/** One rig that every limited role reaches, one that none reaches, one that they reach and that is locked out. */
export const rigs = ['own', 'foreign', 'locked'] as const;
export type RigName = (typeof rigs)[number];

/** Documents of one rig by the first part of the routes that name them. */
type Documents = Record<string, string>;

export interface MatrixRoute {
  name: string;
  method: (typeof methods)[number];
  path: string;
  access: Access[];
  isEmergency: boolean;
  /** True where the request names a rig or one of its documents. */
  isOfRig: boolean;
}

/** What a request met: let in, or kept out for want of a session, of a role, or of the rig. */
export type Cell = '+' | '?' | '-' | 'x' | `! ${string}`;

/** Rig named by the body rather than by the path, by the name of the route. */
const bodies: Record<string, (rigId: string, documents: Documents) => object> = {
  'POST /rigs': (rigId) => ({ id: rigId }),
  'POST /objectives': (rigId) => ({ rigId }),
  'POST /experiments': (rigId) => ({ rigId }),
  'POST /experiments/preflight': (rigId) => ({ rigId }),
  'POST /runs': (_, { experiments }) => ({ experimentId: experiments }),
};

export function routesOf(server: TestServer): MatrixRoute[] {
  return Object.entries(openApiDocument(server.app).paths).flatMap(([path, item]) =>
    methods.flatMap((method) => {
      const operation = item[method] as unknown as Record<string, unknown> | undefined;
      if (operation === undefined) return [];
      const name = `${method.toUpperCase()} ${path.replace('/api/v1', '')}`;
      return {
        ...{ name, method, path },
        access: operation[accessExtension] as Access[],
        isEmergency: operation[emergencyExtension] === true,
        isOfRig: path.includes('{rigId}') || path.includes('{id}') || name in bodies,
      };
    }),
  );
}

/** What the API promises: written without the guard's code, so that a slip there shows here. */
export function expectedCell(route: MatrixRoute, role: Role | null, rig: RigName): Cell {
  if (route.access.includes('anyone')) return '+';
  if (role === null) return '?';
  if (!route.access.includes('signed-in') && !route.access.includes(role)) return '-';
  const isKept = rig === 'foreign' && route.isOfRig && !route.isEmergency && role !== 'administrator';
  return isKept ? 'x' : '+';
}

/** Rigs with documents of each kind, and a person per role who reaches two of them. */
export class MatrixStation {
  private readonly documents = new Map<RigName, Documents>();

  private constructor(private readonly server: TestServer) {}

  static async make(server: TestServer): Promise<MatrixStation> {
    const station = new MatrixStation(server);
    for (const rig of rigs) await station.makeRig(rig);
    const at = new Date().toISOString();
    const lockout = {
      id: 'lockout',
      rigId: 'locked',
      by: 'officer',
      reason: 'Hands in it.',
      at,
      mayLift: [],
    };
    await server.app.get(DataSource).getRepository(RigLockoutEntity).insert(lockout);
    return station;
  }

  /** A client of one who has the role on the rigs `own` and `locked` alone. */
  async as(role: Role): Promise<Client> {
    const account = `the-${role}`;
    await this.server.as(account, role);
    const limits = role === 'administrator' ? [] : [{ role, rigs: ['own', 'locked'] }];
    const database = this.server.app.get(DataSource);
    await database.query('UPDATE "user" SET "rigLimits" = ? WHERE "account" = ?', [
      JSON.stringify(limits),
      account,
    ]);
    // Only its author submits a draft: here whoever has the role is its author.
    await database.query('UPDATE "envelope" SET "author" = ?', [account]);
    return this.server.as(account, role);
  }

  /** Sends every request as one who has the role, or as nobody. */
  async walk(matrix: Matrix, role: Role | null, walked: readonly RigName[]): Promise<void> {
    let client = role === null ? this.server.anyone : await this.as(role);
    for (const route of matrix.routes) {
      for (const rig of route.isOfRig ? walked : walked.slice(0, 1)) {
        matrix.keep(route, role, rig, await this.send(client, route, rig));
        const isSignedOut = route.name === 'POST /auth/sign-out';
        if (isSignedOut && role !== null) client = await this.as(role);
      }
    }
  }

  private async send(client: Client, route: MatrixRoute, rig: RigName): Promise<Cell> {
    const documents = this.documents.get(rig) ?? {};
    const [, , , first = ''] = route.path.split('/');
    const path = route.path
      .replace('{rigId}', rig)
      .replace('{id}', documents[first] ?? 'none')
      .replace('{version}', '1')
      .replace('{scan}', '1')
      .replace(/\{\w+\}/g, 'none');
    const request = client[route.method](path);
    const body = bodies[route.name]?.(rig, documents);
    const { status, body: answer } = await (body === undefined ? request : request.send(body));
    return cellOf(status, (answer as { code?: string } | null)?.code);
  }

  private async makeRig(rigId: RigName): Promise<void> {
    const engineer = await this.server.as('engineer', 'test-engineer');
    this.server.hosts.setPhase(rigId, 'idle');
    const make = async (path: string, body: object) =>
      ((await engineer.post(`/api/v1/${path}`).send(body).expect(201)).body as { id: string }).id;
    await make('rigs', rigInput({ id: rigId }));
    const calibration = {
      conversion: { kind: 'linear', gain: 1, offset: 0 },
      calibratedOn: '2026-11-02',
      dueOn: '2126-11-02',
      expandedUncertainty: 0.1,
      certificate: 'BTS-0042',
      note: '',
    };
    const documents = {
      calibrations: await make(`rigs/${rigId}/calibrations`, { channel: 'o2', content: calibration }),
      envelopes: await make(`rigs/${rigId}/envelopes`, { content: envelopeInput() }),
      experiments: await make('experiments', { rigId, content: experimentInput() }),
      objectives: await make('objectives', { rigId, content: objectiveInput }),
      runs: `run-of-${rigId}`,
    };
    await this.server.app.get(RunRecords).open(runRow(documents.runs, rigId, documents.experiments));
    this.documents.set(rigId, documents);
  }
}

function runRow(id: string, rigId: string, experimentId: string) {
  const at = new Date().toISOString();
  return {
    ...{ id, rigId, experimentId, experimentVersion: 1, experimentTitle: 'Hold', envelopeVersion: 1 },
    ...{ status: 'running' as const, verdict: null, reason: null, startedAt: at, endedAt: null },
    ...{ startedBy: 'engineer', scans: 0, results: {}, warnings: [], fileSha256: null, idempotencyKey: null },
  };
}

function cellOf(status: number, code: string | undefined): Cell {
  if (status === 401 && code === 'auth.required') return '?';
  if (status === 403 && code === 'auth.forbidden') return '-';
  if (status === 403 && code === 'auth.foreign-rig') return 'x';
  return [401, 403, 500].includes(status) && !isOwnAnswer(code) ? `! ${status} ${code}` : '+';
}

/** Refusals of what is asked for, by whoever was let in. */
function isOwnAnswer(code: string | undefined): boolean {
  return code === 'auth.failed' || code === 'envelope.own-draft' || code === 'auth.setup-code';
}

/** What was found, and what of it is not as promised. */
export class Matrix {
  readonly unexpected: string[] = [];
  private readonly cells = new Map<string, Cell>();

  constructor(readonly routes: readonly MatrixRoute[]) {}

  get size(): number {
    return this.cells.size;
  }

  cell(route: MatrixRoute, role: Role | null, rig: RigName): Cell | undefined {
    return this.cells.get(keyOf(route, role, rig));
  }

  keep(route: MatrixRoute, role: Role | null, rig: RigName, cell: Cell): void {
    const expected = expectedCell(route, role, rig);
    const key = keyOf(route, role, rig);
    this.cells.set(key, cell);
    if (cell !== expected) this.unexpected.push(`${key}: ${cell} instead of ${expected}`);
  }

  /** As text: a line per route, a column per role with a sign for each rig. */
  print(): string {
    const columns = ['nobody', ...roles];
    const width = Math.max(...this.routes.map(({ name }) => name.length));
    const at = (route: MatrixRoute, role: Role | null, rig: RigName) =>
      (this.cell(route, role, rig) ?? ' ').slice(0, 1);
    const lines = this.routes.map((route) => {
      const ofRoles = roles.map((role) => rigs.map((rig) => at(route, role, rig)).join(''));
      const signs = [at(route, null, 'own'), ...ofRoles];
      const padded = signs.map((sign, index) => sign.padEnd(columns[index]?.length ?? 0));
      return `${route.name.padEnd(width)}  ${padded.join('  ')}`;
    });
    const legend =
      'Signs for the rigs own, foreign, locked out: + let in, - not this role, x not this rig, ? sign in first.';
    const count = `${this.size} cells, ${this.unexpected.length} unexpected permissions`;
    return [`${''.padEnd(width)}  ${columns.join('  ')}`, ...lines, legend, count, ''].join('\n');
  }
}

function keyOf(route: MatrixRoute, role: Role | null, rig: RigName): string {
  return `${route.name} by ${role ?? 'nobody'} on ${rig}`;
}
