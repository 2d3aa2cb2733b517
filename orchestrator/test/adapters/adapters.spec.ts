import type { SerialPortListing } from '@cresthold/adapters';
import { adapterListSchema } from '../../src/adapters/dto/adapter.dto.js';
import { serialPortListSchema } from '../../src/adapters/dto/serial-port.dto.js';
import { SerialPortsPort } from '../../src/adapters/serial-ports.port.js';
import { createTestServer, type TestServer } from '../server/create-test-server.js';

const port: SerialPortListing = {
  path: '/dev/ttyUSB0',
  stablePath: '/dev/serial/by-id/usb-converter-if00',
  manufacturer: 'maker',
  serialNumber: '42',
  vendorId: '0403',
  productId: '6001',
};
const unknown = { stablePath: null, manufacturer: null, serialNumber: null, vendorId: null, productId: null };

describe('adapters over HTTP', () => {
  let server: TestServer;
  beforeAll(async () => {
    server = await createTestServer();
  });
  afterEach(() => {
    jest.restoreAllMocks();
  });
  afterAll(() => server.close());

  it('lists serial ports as the operating system tells of them, to whoever is signed in', async () => {
    const items = [port, { path: '/dev/ttyS0', ...unknown }];
    jest.spyOn(server.app.get(SerialPortsPort), 'list').mockResolvedValue(items);
    const client = await server.as('reader', 'reader');
    const { body } = await client.get('/api/v1/adapters/serial-ports').expect(200);
    expect(body).toEqual({ items, nextCursor: null });
    expect(serialPortListSchema.parse(body)).toEqual(body);
    await server.anyone.get('/api/v1/adapters/serial-ports').expect(401);
  });

  it('lists the serial ports of this machine, whatever it has', async () => {
    const client = await server.as('reader', 'reader');
    const { body } = await client.get('/api/v1/adapters/serial-ports').expect(200);
    serialPortListSchema.parse(body);
  });

  it('lists serial-text with schemas whose fields have titles and help', async () => {
    const client = await server.as('reader', 'reader');
    const { items } = adapterListSchema.parse((await client.get('/api/v1/adapters').expect(200)).body);
    const serialText = items.find(({ id }) => id === 'serial-text');
    const texts = { title: expect.any(String), description: expect.any(String) };
    for (const schema of [serialText?.configurationSchema, serialText?.addressSchema]) {
      for (const [name, field] of Object.entries(schema?.['properties'] as Record<string, object>)) {
        expect([name, field]).toEqual([name, expect.objectContaining(texts)]);
      }
    }
  });
});
