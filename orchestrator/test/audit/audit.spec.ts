import { auditCsvLine } from '../../src/audit/audit-csv.js';
import { createTestServer, type Client, type TestServer } from '../server/create-test-server.js';
import { rigInput } from '../server/documents.js';

describe('the audit log over the API', () => {
  let server: TestServer;
  let officer: Client;

  beforeEach(async () => {
    server = await createTestServer();
    officer = await server.as('officer', 'safety-officer');
    const engineer = await server.as('engineer', 'test-engineer');
    for (const id of ['a', 'b', 'c']) await engineer.post('/api/v1/rigs').send(rigInput({ id })).expect(201);
  });
  afterEach(() => server.close());

  it('is searched, newest first, in pages', async () => {
    const first = await officer.get('/api/v1/audit?action=rig.&limit=2').expect(200);
    expect(first.body.items.map((item: { rigId: string }) => item.rigId)).toEqual(['c', 'b']);
    const query = { action: 'rig.', limit: 2, cursor: first.body.nextCursor };
    const second = await officer.get('/api/v1/audit').query(query).expect(200);
    expect(second.body.items.map((item: { rigId: string }) => item.rigId)).toEqual(['a']);
    const filters = [
      ['rigId=b', 1],
      ['account=engineer', 3],
      ['account=nobody', 0],
      ['from=2000-01-01T00:00:00Z&action=rig.created', 3],
      ['to=2000-01-01T00:00:00Z', 0],
    ] as const;
    for (const [filter, count] of filters) {
      const { body } = await officer.get(`/api/v1/audit?${filter}`).expect(200);
      expect([filter, body.items.length]).toEqual([filter, count]);
    }
  });

  it('is exported as CSV that no spreadsheet takes for formulas', async () => {
    const { text, headers } = await officer.get('/api/v1/audit/export?rigId=a').expect(200);
    expect(headers['content-type']).toContain('text/csv');
    const [header, ...lines] = text.trimEnd().split('\r\n');
    expect(header).toBe('id,at,account,action,rigId,subject,reason,before,after,hash');
    expect(lines[0]).toMatch(/^\d+,2.*,engineer,rig\.created,a,,,,,[0-9a-f]{64}$/);
    const act = { id: 1, at: '', account: 'engineer', action: 'rig.locked-out', rigId: 'a', subject: null };
    const line = auditCsvLine({ ...act, reason: '=1+1, "quoted"', before: null, after: { a: 1 }, hash: '' });
    expect(line).toBe(`1,,engineer,rig.locked-out,a,,"'=1+1, ""quoted""",,"{""a"":1}",\r\n`);
  });

  it('is verified, and shown to nobody else', async () => {
    const { body } = await officer.get('/api/v1/audit/verification').expect(200);
    expect(body).toMatchObject({ isIntact: true, firstBreak: null });
    const technician = await server.as('technician', 'technician');
    for (const path of ['', '/verification', '/export']) {
      await technician.get(`/api/v1/audit${path}`).expect(403);
    }
  });
});
