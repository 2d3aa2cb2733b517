import { roles } from '@cresthold/shared';
import { createTestServer } from '../server/create-test-server.js';
import { Matrix, MatrixStation, rigs, routesOf } from './access-matrix.js';

describe('the whole matrix of routes, roles and rigs', () => {
  it('has no unexpected permission', async () => {
    const server = await createTestServer();
    await server.app.listen(0, '127.0.0.1');
    const station = await MatrixStation.make(server);
    const matrix = new Matrix(routesOf(server));
    for (const role of [null, ...roles]) await station.walk(matrix, role, role === null ? ['own'] : rigs);
    process.stdout.write(matrix.print());
    expect(matrix.unexpected).toEqual([]);
    await server.close();
  }, 180_000);
});
