import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createTestServer, testPassword, type TestServer } from '../server/create-test-server.js';
import { rigInput } from '../server/documents.js';

const page = '<!doctype html><title>console</title>';

describe('the edge', () => {
  let server: TestServer;
  let consoleFolder: string;

  beforeAll(async () => {
    consoleFolder = mkdtempSync(join(tmpdir(), 'cresthold-console-'));
    mkdirSync(join(consoleFolder, 'assets'));
    writeFileSync(join(consoleFolder, 'index.html'), page);
    writeFileSync(join(consoleFolder, 'assets', 'app-1234.js'), 'void 0;');
    server = await createTestServer({ consoleFolder });
  });
  afterAll(async () => {
    await server.close();
    rmSync(consoleFolder, { recursive: true });
  });

  it.each(['/', '/rigs/kiln-1', '/runs/12?tab=events'])('answers %s with the console', async (path) => {
    const answer = await server.anyone.get(path).expect(200);
    expect(answer.text).toBe(page);
    expect(answer.headers['cache-control']).toBe('no-cache');
  });

  it('serves assets for good, and does not answer a missing one with a page', async () => {
    const asset = await server.anyone.get('/assets/app-1234.js').expect(200);
    expect(asset.headers['cache-control']).toContain('immutable');
    await server.anyone.get('/assets/app-9999.js').expect(404);
  });

  it.each(['/api/none', '/api/v1/none', '/api/v1/rigs/a/b/c'])(
    'answers %s with problem details',
    async (path) => {
      const answer = await server.anyone.get(path).expect(404);
      expect(answer.headers['content-type']).toContain('application/problem+json');
      expect(answer.body).toEqual({
        type: 'urn:cresthold:error:request.not-found',
        title: 'Not found',
        status: 404,
        detail: 'Nothing is at this address.',
        code: 'request.not-found',
        errors: [],
      });
    },
  );

  it('serves the document and its pages from its own files', async () => {
    const document = await server.anyone.get('/api/openapi.json').expect(200);
    expect(document.body.openapi).toMatch(/^3\./);
    const docs = await server.anyone.get('/api/docs').redirects(1).expect(200);
    const sources = [...docs.text.matchAll(/(?:src|href)="([^"]+)"/g)].map((match) => match[1] ?? '');
    expect(sources.length).toBeGreaterThan(2);
    expect(sources.filter((source) => /^(https?:)?\/\//.test(source))).toEqual([]);
  });

  it('lets pages load nothing but its own files and be framed by nobody', async () => {
    for (const path of ['/', '/api/v1/setup', '/api/docs/']) {
      const { headers } = await server.anyone.get(path);
      expect(headers['content-security-policy']).toContain("script-src 'self';");
      expect(headers['content-security-policy']).toContain("frame-ancestors 'none'");
      expect(headers['x-content-type-options']).toBe('nosniff');
      expect(headers['x-powered-by']).toBeUndefined();
    }
  });

  it.each([
    { origin: 'http://evil.example' },
    { origin: 'null' },
    { origin: 'not an origin' },
    { 'sec-fetch-site': 'cross-site' },
    { 'sec-fetch-site': 'same-site' },
  ])('refuses a change that a page elsewhere asks for: %j', async (headers) => {
    const engineer = await server.as('engineer', 'test-engineer');
    const answer = await engineer.post('/api/v1/rigs').set(headers).send(rigInput()).expect(403);
    expect(answer.body.code).toBe('request.cross-origin');
    expect((await engineer.get('/api/v1/rigs')).body.items).toEqual([]);
  });

  it('takes a change from a page of its own', async () => {
    const engineer = await server.as('engineer', 'test-engineer');
    const headers = {
      host: 'bench.local:4380',
      origin: 'http://bench.local:4380',
      'sec-fetch-site': 'same-origin',
    };
    await engineer.post('/api/v1/experiments/preflight').set(headers).send({}).expect(400);
  });

  it('takes JSON only, so that a plain form can ask for nothing', async () => {
    const form = await server.anyone
      .post('/api/v1/auth/sign-in')
      .type('form')
      .send({ account: 'engineer', password: testPassword });
    expect([form.status, form.body.code]).toEqual([400, 'request.media-type']);
    const reader = await server.as('reader', 'reader');
    await reader.post('/api/v1/rigs/emergency-stop').type('text').send('stop!').expect(200);
    const nothing = await server.anyone.post('/api/v1/auth/sign-in');
    expect([nothing.status, nothing.body.code]).toEqual([400, 'request.media-type']);
    const broken = await server.anyone.post('/api/v1/auth/sign-in').type('json').send('{"account":');
    expect([broken.status, broken.body.code]).toEqual([400, 'request.invalid']);
    const large = await server.anyone
      .post('/api/v1/auth/sign-in')
      .send({ account: 'x'.repeat(5_000_000), password: 'x' });
    expect([large.status, large.body.code]).toEqual([400, 'request.too-large']);
  });
});
