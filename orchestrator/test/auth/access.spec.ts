import { Controller, Get, Module } from '@nestjs/common';
import { APP_FILTER, APP_GUARD } from '@nestjs/core';
import { Test } from '@nestjs/testing';
import request from 'supertest';
import {
  accessExtension,
  emergencyExtension,
  reauthenticationExtension,
  type Access,
} from '../../src/auth/access.decorator.js';
import { RigsOfRequest } from '../../src/auth/rigs-of-request.js';
import { RolesGuard } from '../../src/auth/roles.guard.js';
import { SessionsService } from '../../src/auth/sessions.service.js';
import { openApiDocument } from '../../src/http/open-api.js';
import { ProblemDetailsFilter } from '../../src/problem-details/problem-details.filter.js';
import { createTestServer, type TestServer } from '../server/create-test-server.js';

/** Who may do what, as docs/api.md says it; written out a second time so that a slip in one shows. */
const expected: Record<string, Access[]> = {
  'GET /adapters': ['signed-in'],
  'GET /adapters/serial-ports': ['signed-in'],
  'GET /audit': ['administrator', 'safety-officer'],
  'GET /audit/export': ['administrator', 'safety-officer'],
  'GET /audit/verification': ['administrator', 'safety-officer'],
  'POST /auth/password': ['signed-in'],
  'POST /auth/reauthenticate': ['signed-in'],
  'GET /auth/second-factor': ['signed-in'],
  'POST /auth/second-factor': ['signed-in'],
  'POST /auth/second-factor/confirm': ['signed-in'],
  'POST /auth/second-factor/remove': ['signed-in'],
  'GET /auth/session': ['signed-in'],
  'DELETE /auth/sessions': ['signed-in'],
  'GET /auth/sessions': ['signed-in'],
  'DELETE /auth/sessions/{sessionId}': ['signed-in'],
  'POST /auth/sign-in': ['anyone'],
  'POST /auth/sign-out': ['signed-in'],
  'GET /calibrations/{id}': ['signed-in'],
  'GET /calibrations/{id}/certificate': ['signed-in'],
  'PUT /calibrations/{id}/certificate': ['test-engineer', 'safety-officer'],
  'POST /calibrations/{id}/withdraw': ['test-engineer', 'safety-officer'],
  'GET /envelopes/{id}': ['signed-in'],
  'PUT /envelopes/{id}': ['test-engineer', 'safety-officer'],
  'POST /envelopes/{id}/approve': ['safety-officer'],
  'POST /envelopes/{id}/return': ['safety-officer'],
  'POST /envelopes/{id}/submit': ['test-engineer', 'safety-officer'],
  'GET /experiments': ['signed-in'],
  'POST /experiments': ['test-engineer'],
  'POST /experiments/preflight': ['signed-in'],
  'GET /experiments/{id}': ['signed-in'],
  'GET /experiments/{id}/versions': ['signed-in'],
  'POST /experiments/{id}/versions': ['test-engineer'],
  'GET /experiments/{id}/versions/{version}': ['signed-in'],
  'GET /health': ['anyone'],
  'GET /objectives': ['signed-in'],
  'POST /objectives': ['test-engineer'],
  'GET /objectives/{id}': ['signed-in'],
  'PUT /objectives/{id}': ['test-engineer'],
  'GET /rigs': ['signed-in'],
  'POST /rigs': ['test-engineer', 'administrator'],
  'POST /rigs/emergency-stop': ['signed-in'],
  'POST /rigs/scan-budget': ['signed-in'],
  'GET /rigs/{rigId}': ['signed-in'],
  'PUT /rigs/{rigId}': ['test-engineer', 'administrator'],
  'POST /rigs/{rigId}/arm': ['test-engineer', 'technician'],
  'GET /rigs/{rigId}/calibrations': ['signed-in'],
  'POST /rigs/{rigId}/calibrations': ['test-engineer', 'safety-officer'],
  'POST /rigs/{rigId}/channels/{channel}/probe': ['test-engineer', 'technician'],
  'PUT /rigs/{rigId}/connections/{connection}/fault': ['test-engineer'],
  'POST /rigs/{rigId}/disarm': ['test-engineer', 'technician'],
  'POST /rigs/{rigId}/emergency-stop': ['signed-in'],
  'GET /rigs/{rigId}/envelopes': ['signed-in'],
  'POST /rigs/{rigId}/envelopes': ['test-engineer', 'safety-officer'],
  'POST /rigs/{rigId}/envelopes/replay': ['signed-in'],
  'POST /rigs/{rigId}/interlocks/{interlock}/acknowledge': ['technician', 'test-engineer', 'safety-officer'],
  'DELETE /rigs/{rigId}/interlocks/{interlock}/bypass': ['technician', 'test-engineer', 'safety-officer'],
  'POST /rigs/{rigId}/interlocks/{interlock}/bypass': ['safety-officer'],
  'GET /rigs/{rigId}/lockouts': ['signed-in'],
  'POST /rigs/{rigId}/lockouts': ['test-engineer', 'technician', 'safety-officer', 'administrator'],
  'POST /rigs/{rigId}/lockouts/{lockoutId}/lift': [
    'test-engineer',
    'technician',
    'safety-officer',
    'administrator',
  ],
  'POST /rigs/{rigId}/moves': ['test-engineer', 'technician'],
  'POST /rigs/{rigId}/moves/release': ['test-engineer', 'technician'],
  'GET /rigs/{rigId}/proof-tests': ['signed-in'],
  'POST /rigs/{rigId}/proof-tests': ['technician', 'test-engineer', 'safety-officer'],
  'POST /rigs/{rigId}/proof-tests/arm': ['test-engineer', 'technician'],
  'GET /rigs/{rigId}/proof-tests/due': ['signed-in'],
  'GET /rigs/{rigId}/proof-tests/{testId}': ['signed-in'],
  'POST /rigs/{rigId}/proof-tests/{testId}/sign': ['technician', 'test-engineer', 'safety-officer'],
  'POST /rigs/{rigId}/reset': ['safety-officer'],
  'GET /rigs/{rigId}/status': ['signed-in'],
  'GET /rigs/{rigId}/trips': ['signed-in'],
  'GET /rigs/{rigId}/trips/{tripId}': ['signed-in'],
  'GET /runs': ['signed-in'],
  'POST /runs': ['test-engineer', 'technician'],
  'GET /runs/{id}': ['signed-in'],
  'GET /runs/{id}/columns': ['signed-in'],
  'GET /runs/{id}/events': ['signed-in'],
  'POST /runs/{id}/pause': ['test-engineer', 'technician'],
  'POST /runs/{id}/resume': ['test-engineer', 'technician'],
  'GET /runs/{id}/samples': ['signed-in'],
  'POST /runs/{id}/stop': ['test-engineer', 'technician'],
  'GET /runs/{id}/trace-channels': ['signed-in'],
  'GET /runs/{id}/traces': ['signed-in'],
  'GET /runs/{id}/traces/{scan}': ['signed-in'],
  'GET /setup': ['anyone'],
  'POST /setup': ['anyone'],
  'GET /users': ['administrator'],
  'POST /users': ['administrator'],
  'PATCH /users/{account}': ['administrator'],
  'POST /users/{account}/second-factor/reset': ['administrator'],
  'DELETE /users/{account}/sessions': ['administrator'],
  'GET /users/{account}/sessions': ['administrator'],
  'DELETE /users/{account}/sessions/{sessionId}': ['administrator'],
};

const methods = ['get', 'post', 'put', 'patch', 'delete'] as const;

interface Route {
  name: string;
  access: Access[];
  operation: Record<string, unknown>;
}

function accessOf(operation: object | undefined): Access[] {
  return (operation as Record<string, Access[] | undefined> | undefined)?.[accessExtension] ?? [];
}

function routesOfDocument(server: TestServer): Route[] {
  return Object.entries(openApiDocument(server.app).paths).flatMap(([path, item]) =>
    methods
      .filter((method) => item[method] !== undefined)
      .map((method) => ({
        name: `${method.toUpperCase()} ${path.replace('/api/v1', '')}`,
        access: accessOf(item[method]),
        operation: item[method] as unknown as Record<string, unknown>,
      })),
  );
}

describe('access', () => {
  let server: TestServer;
  let routes: Route[];

  beforeAll(async () => {
    server = await createTestServer();
    routes = routesOfDocument(server);
  });
  afterAll(() => server.close());

  it('is stated in the document for every route as the API says', () => {
    const stated = Object.fromEntries(routes.map(({ name, access }) => [name, access]));
    expect(stated).toEqual(expected);
  });

  it('names the routes that stop, which no limit holds up, and those that need the password again', () => {
    const marked = (extension: string) =>
      routes.filter(({ operation }) => operation[extension] === true).map(({ name }) => name);
    expect(marked(emergencyExtension).sort()).toEqual([
      'POST /rigs/emergency-stop',
      'POST /rigs/{rigId}/emergency-stop',
    ]);
    expect(marked(reauthenticationExtension).sort()).toEqual([
      'POST /envelopes/{id}/approve',
      'POST /rigs/{rigId}/interlocks/{interlock}/bypass',
      'POST /rigs/{rigId}/proof-tests/{testId}/sign',
      'POST /rigs/{rigId}/reset',
      'POST /users/{account}/second-factor/reset',
    ]);
  });

  it('has every route of the server in the document', () => {
    interface Layer {
      route?: { path: string; methods: Record<string, boolean> };
    }
    const { stack } = server.app.getHttpAdapter().getInstance().router as { stack: Layer[] };
    const served = stack.flatMap(({ route }) =>
      route === undefined || !route.path.startsWith('/api/v1/')
        ? []
        : Object.keys(route.methods).map((method) => `${method.toUpperCase()} ${asDocumented(route.path)}`),
    );
    expect(served.length).toBeGreaterThan(20);
    expect(new Set(served)).toEqual(new Set(routes.map((route) => route.name)));
  });
});

describe('a route that states no roles', () => {
  @Controller('forgotten')
  class ForgottenController {
    @Get()
    read(): string {
      return 'should not be seen';
    }
  }

  @Module({
    controllers: [ForgottenController],
    providers: [
      { provide: APP_GUARD, useClass: RolesGuard },
      { provide: SessionsService, useValue: {} },
      { provide: RigsOfRequest, useValue: {} },
      { provide: APP_FILTER, useClass: ProblemDetailsFilter },
    ],
  })
  class ForgottenModule {}

  it('is closed to all', async () => {
    const module = await Test.createTestingModule({ imports: [ForgottenModule] }).compile();
    const app = module.createNestApplication({ logger: false });
    await app.init();
    const answer = await request(app.getHttpServer()).get('/forgotten');
    expect([answer.status, answer.body.code]).toEqual([403, 'auth.forbidden']);
    await app.close();
  });
});

/** An Express path in the document's way of writing it. */
function asDocumented(path: string): string {
  return path.replace('/api/v1', '').replace(/:(\w+)/g, '{$1}');
}
