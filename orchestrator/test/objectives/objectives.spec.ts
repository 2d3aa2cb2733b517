import { createTestServer, type Client, type TestServer } from '../server/create-test-server.js';
import { objectiveInput, rigInput } from '../server/documents.js';

describe('objectives', () => {
  let server: TestServer;
  let engineer: Client;
  const create = (content: object, rigId = 'kiln-1') =>
    engineer.post('/api/v1/objectives').send({ rigId, content });

  beforeEach(async () => {
    server = await createTestServer();
    engineer = await server.as('engineer', 'test-engineer');
    await engineer.post('/api/v1/rigs').send(rigInput()).expect(201);
    await engineer
      .post('/api/v1/rigs')
      .send(rigInput({ id: 'kiln-2' }))
      .expect(201);
  });
  afterEach(() => server.close());

  it('are written, read, changed on top of the latest revision and listed by rig', async () => {
    const made = await create(objectiveInput).expect(201);
    const { id } = made.body;
    expect(made.body).toEqual({
      id,
      rigId: 'kiln-1',
      revision: 1,
      content: { ...objectiveInput, validity: [] },
    });
    expect(made.headers.location).toBe(`/api/v1/objectives/${id}`);
    await create(objectiveInput, 'kiln-2').expect(201);

    const change = (etag: string, title: string) =>
      engineer
        .put(`/api/v1/objectives/${id}`)
        .set('If-Match', etag)
        .send({ content: { ...objectiveInput, title } });
    expect((await change('"1"', 'Second thought').expect(200)).headers.etag).toBe('"2"');
    expect((await change('"1"', 'Too late').expect(409)).body.code).toBe('request.precondition');

    const all = await engineer.get('/api/v1/objectives').expect(200);
    expect(all.body.items).toHaveLength(2);
    const ofOne = await engineer.get('/api/v1/objectives?rigId=kiln-1').expect(200);
    expect(ofOne.body.items).toMatchObject([{ id, revision: 2, content: { title: 'Second thought' } }]);
  });

  it.each([
    ['content.expression', { expression: 'effciency' }],
    ['content.expression', { expression: '' }],
    ['content.direction', { direction: 'sideways' }],
    ['content.validity[0].condition', { validity: [{ condition: 'co << 4', message: 'Too much CO.' }] }],
    ['content.validity[0].condition', { validity: [{ condition: 'co', message: 'Too much CO.' }] }],
    ['content.validity[0].message', { validity: [{ condition: 'co < 400', message: '' }] }],
  ])('name the field %s where it is at fault, and write nothing', async (field, fault) => {
    const answer = await create({ ...objectiveInput, ...fault }).expect(400);
    expect(answer.body.errors.map((error: { field: string }) => error.field)).toContain(field);
    expect((await engineer.get('/api/v1/objectives')).body.items).toEqual([]);
  });

  it('belong to a rig that exists', async () => {
    expect((await create(objectiveInput, 'nowhere').expect(404)).body.code).toBe('rig.not-found');
    expect((await engineer.get('/api/v1/objectives/none').expect(404)).body.code).toBe('objective.not-found');
  });
});
