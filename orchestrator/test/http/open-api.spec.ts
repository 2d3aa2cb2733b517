import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { openApiDocument } from '../../src/http/open-api.js';
import { createTestServer, type TestServer } from '../server/create-test-server.js';

describe('the OpenAPI document', () => {
  let server: TestServer;
  beforeAll(async () => {
    server = await createTestServer();
  });
  afterAll(() => server.close());

  it('is the one in orchestrator/openapi.json, of which the console makes its client', () => {
    const kept: unknown = JSON.parse(readFileSync(join(__dirname, '../../openapi.json'), 'utf8'));
    // Mend a difference with `npm run build:api`.
    expect(JSON.parse(JSON.stringify(openApiDocument(server.app)))).toEqual(kept);
  });

  it('says of every operation what it does, what it answers and how it fails', () => {
    for (const [path, item] of Object.entries(openApiDocument(server.app).paths)) {
      for (const [method, operation] of Object.entries(item)) {
        const { summary, responses } = operation as { summary?: string; responses: object };
        expect([method, path, summary]).toEqual([method, path, expect.stringMatching(/\S{3,}/)]);
        expect(Object.keys(responses)).toContain('default');
        expect(Object.keys(responses).some((status) => /^2\d\d$/.test(status))).toBe(true);
      }
    }
  });

  it('names every schema that it points at', () => {
    const document = openApiDocument(server.app);
    const names = Object.keys(document.components?.schemas ?? {});
    const pointed = JSON.stringify(document).matchAll(/"#\/components\/schemas\/([^"]+)"/g);
    expect(new Set([...pointed].map((match) => match[1]))).toEqual(new Set(names));
  });
});
