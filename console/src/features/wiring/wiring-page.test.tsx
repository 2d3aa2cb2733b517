import { fireEvent, screen, waitFor, within } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import type { Rig, Role } from '@cresthold/shared';
import { demoEnvelope, demoRig, demoStatus, sessionOf } from '../../testing/documents.js';
import { json, list, problem, serve, type Handler } from '../../testing/fake-server.js';
import { renderConsole } from '../../testing/render-console.js';

const modbus = {
  id: 'modbus-tcp',
  title: 'Modbus TCP',
  ...{
    version: '0.1.0',
    contract: '^1.1.0',
    origin: 'shipped',
    reference: null,
    state: 'ready',
    error: null,
  },
  configurationSchema: {
    type: 'object',
    properties: { host: { type: 'string', title: 'Host' } },
    required: ['host'],
  },
  addressSchema: {
    type: 'object',
    properties: {
      register: { type: 'integer', title: 'Register' },
      type: { type: 'string', enum: ['u16', 'f32'], title: 'Type' },
    },
    required: ['register', 'type'],
  },
};
const rig: Rig = {
  ...demoRig,
  connections: [{ ...demoRig.connections[0]!, configuration: { host: 'plc.local' } }],
  channels: demoRig.channels.map((channel, at) => ({ ...channel, address: { register: at, type: 'u16' } })),
};
const document = { id: rig.id, revision: 4, content: rig, status: demoStatus };
const budget = {
  faults: [],
  connections: [{ id: 'plc', channels: 3, leftOut: 0, requests: 1, wireS: 0.01, note: null }],
  ...{ requests: 1, wireS: 0.01, periodMs: 50, shareOfPeriod: 0.2 },
};

function open(
  role: Role = 'test-engineer',
  more: Record<string, Handler> = {},
  path = '/rigs/burner-1/wiring',
) {
  const seen = serve({
    'GET /auth/session': () => json(sessionOf(role)),
    'GET /rigs': list(document),
    'GET /rigs/burner-1': () => json(document),
    'GET /rigs/burner-1/envelopes': list(demoEnvelope),
    'GET /rigs/burner-1/calibrations': list(),
    'GET /rigs/burner-1/trips': list(),
    'GET /adapters': list(modbus),
    'POST /rigs/scan-budget': () => json(budget),
    ...more,
  });
  return { ...renderConsole(path), seen };
}

const cell = (name: string) => screen.findByLabelText<HTMLInputElement>(name, { exact: true });
const type = (field: HTMLElement, value: string) => fireEvent.change(field, { target: { value } });
const press = async (name: string | RegExp) => fireEvent.click(await screen.findByRole('button', { name }));

describe('the wiring page', () => {
  it('shows what a draft will cost while it is typed, amber above 80 %, and its faults at their cells', async () => {
    const { seen } = open('test-engineer', {
      'POST /rigs/scan-budget': ({ body }) => {
        const { channels } = body as { channels: { address: { register: number } }[] };
        const isWrong = channels[0]?.address.register === 70_000;
        const faults = isWrong ? [{ field: 'channels[0].address.register', message: '65535 at most.' }] : [];
        return json({ ...budget, faults, wireS: isWrong ? 0.045 : 0.01, shareOfPeriod: isWrong ? 0.9 : 0.2 });
      },
    });
    expect(await screen.findByText(/One request a scan, 10\.0 ms on the wire of 50 ms: 20 %/)).toBeDefined();
    type(await cell('Register of Oxygen in flue gas'), '70000');
    expect(await screen.findByText(/45\.0 ms on the wire of 50 ms: 90 %/)).toBeDefined();
    expect(screen.getByText(/Little room for retries/)).toBeDefined();
    const field = await cell('Register of Oxygen in flue gas');
    expect(field.getAttribute('aria-invalid')).toBe('true');
    expect(screen.getAllByText('65535 at most.').length).toBeGreaterThan(0);
    type(field, 'four');
    expect((await screen.findAllByText('Give a number.')).length).toBeGreaterThan(0);
    expect(seen.filter(({ method }) => method === 'PUT')).toEqual([]);
    await press('Undo');
    expect((await cell('Register of Oxygen in flue gas')).value).toBe('0');
  });

  it('says what saving withdraws, and saves on top of what it read', async () => {
    const { seen } = open('test-engineer', {
      'PUT /rigs/burner-1': ({ body }) => json({ ...document, revision: 5, content: body }),
    });
    type(await cell('Title of Oxygen in flue gas'), 'Oxygen');
    expect(screen.queryByText('Saving this changes what channels mean')).toBeNull();
    type(await cell('Unit of Oxygen'), 'ppm');
    expect(await screen.findByText(/envelope in force \(version 3\) is withdrawn/)).toBeDefined();
    await press('Save wiring');
    await waitFor(() => expect(screen.getByText('Everything is saved.')).toBeDefined());
    const put = seen.find(({ method }) => method === 'PUT');
    expect(put?.headers.get('If-Match')).toBe('"4"');
    const [first] = (put?.body as Rig).channels;
    expect(first).toEqual({ ...rig.channels[0], title: 'Oxygen', unit: 'ppm' });
  });

  it('keeps the draft where somebody else was first, and saves it over theirs when told to', async () => {
    let revision = 4;
    const { seen } = open('test-engineer', {
      'GET /rigs/burner-1': () => json({ ...document, revision }),
      'PUT /rigs/burner-1': ({ body, headers }) => {
        if (headers.get('If-Match') === '"4"') {
          revision = 5;
          return problem(409, 'request.precondition', 'The document has changed.');
        }
        return json({ ...document, revision: 6, content: body });
      },
    });
    type(await cell('Title of Carbon monoxide'), 'CO');
    await press('Save wiring');
    expect(await screen.findByText(/Somebody saved revision 5/)).toBeDefined();
    expect((await cell('Title of CO')).value).toBe('CO');
    await press(/Keep my draft/);
    await press('Save wiring');
    await waitFor(() => expect(screen.getByText('Everything is saved.')).toBeDefined());
    expect(
      seen.filter(({ method }) => method === 'PUT').map(({ headers }) => headers.get('If-Match')),
    ).toEqual(['"4"', '"5"']);
  });

  it('takes a register map, and cells pasted from a spreadsheet', async () => {
    open();
    await press('Import …');
    const map = 'id;title;address.register;address.type\nfuel;Fuel;7;u16\no2;Oxygen;x;u16\n';
    type(await screen.findByLabelText('Or paste it here'), map);
    expect(await screen.findByText('2 channels read, with one fault')).toBeDefined();
    expect(screen.getByText(/Line 3/).textContent).toBe('Line 3, address.register: Give a number.');
    await press('Add, and replace rows of the same id');
    expect((await cell('Register of Fuel')).value).toBe('7');
    expect((await cell('Register of Oxygen')).value).toBe('x');
    const at = await cell('Title of Fuel');
    fireEvent.paste(at, { clipboardData: { getData: () => 'Gas\r\nAir\r\n' } });
    expect((await cell('Title of Gas')).value).toBe('Gas');
    expect((await cell('Title of Air')).value).toBe('Air');
  });

  it('keeps channels on their wire when it is renamed, and never mixes two wires', async () => {
    open();
    await press('Duplicate connection Burner controller');
    const [first, second] = screen.getAllByRole('group', { name: /modbus-tcp/ }) as [
      HTMLElement,
      HTMLElement,
    ];
    const idOf = (card: HTMLElement) => within(card).getByLabelText<HTMLInputElement>(/^Id/);
    expect(idOf(second).value).toBe('plc-2');
    type(idOf(second), 'plc');
    fireEvent.blur(idOf(second));
    expect(screen.getByText(/Another connection has this id/)).toBeDefined();
    type(idOf(second), 'other');
    fireEvent.blur(idOf(second));
    type(idOf(first), 'main');
    fireEvent.blur(idOf(first));
    expect((await cell('Connection of Carbon monoxide')).value).toBe('main');
    expect(within(second).getByText(/0 channels/)).toBeDefined();
  });

  it('goes from row to row by keyboard', async () => {
    open();
    const first = await cell('Title of Oxygen in flue gas');
    first.focus();
    fireEvent.keyDown(first, { key: 'ArrowDown' });
    expect(document_().activeElement).toBe(await cell('Title of Carbon monoxide'));
    fireEvent.keyDown(document_().activeElement!, { key: 'Enter', shiftKey: true });
    expect(document_().activeElement).toBe(first);
  });

  it('shows what a live test found, for a technician too, who may change nothing', async () => {
    const probe = {
      ...{
        channel: 'o2',
        at: '2026-03-01T10:00:00.000Z',
        source: 'wire',
        note: null,
        trace: null,
        fault: null,
      },
      ...{ raw: 'holding-register 0: 0x0029', value: 41, calibrated: 4.1, ageS: 0, quality: 'good' },
      calibration: { id: 'c', version: 2 },
    };
    open('technician', {
      'POST /rigs/burner-1/channels/o2/probe': () => json(probe),
      'POST /rigs/burner-1/channels/co/probe': () =>
        json({
          ...probe,
          channel: 'co',
          raw: null,
          value: null,
          calibrated: null,
          calibration: null,
          quality: 'bad',
          fault: { code: 'adapter.refused', message: 'Illegal data address.' },
        }),
    });
    await press('Test Oxygen in flue gas');
    expect(await screen.findByText('raw holding-register 0: 0x0029')).toBeDefined();
    expect(screen.getByText('4.1 %')).toBeDefined();
    expect(screen.getByText('by calibration version 2: 41 makes 4.1')).toBeDefined();
    await press('Test Carbon monoxide');
    expect(await screen.findByText(/Illegal data address/)).toBeDefined();
    expect(screen.getByRole<HTMLButtonElement>('button', { name: 'Save wiring' }).disabled).toBe(true);
    expect(screen.queryByLabelText('Title of Carbon monoxide', { exact: true })).toBeNull();
  });

  it('tests nothing that is not saved', async () => {
    open();
    type(await cell('Register of Carbon monoxide'), '9');
    expect(screen.getByRole<HTMLButtonElement>('button', { name: 'Test Carbon monoxide' }).disabled).toBe(
      true,
    );
    expect(screen.getByText('Changed: save it first.')).toBeDefined();
  });

  it('makes a new rig from nothing, and says what is missing once it was tried', async () => {
    const { seen, router } = open(
      'test-engineer',
      {
        'POST /rigs': ({ body }) =>
          json({ ...document, id: 'kiln-1', content: { ...rig, ...(body as Rig) } }, 201),
        'GET /rigs/kiln-1': () => json({ ...document, id: 'kiln-1', content: { ...rig, id: 'kiln-1' } }),
        'GET /rigs/kiln-1/envelopes': list(),
        'GET /rigs/kiln-1/calibrations': list(),
      },
      '/new-rig',
    );
    type(await screen.findByLabelText(/Id of the rig/), 'kiln-1');
    type(await screen.findByLabelText(/Title of the rig/), 'Kiln');
    await press('Add connection');
    const card = screen.getByRole('group', { name: /Modbus TCP/ });
    type(within(card).getByLabelText(/Host/), 'kiln.local');
    await press('Add channel');
    expect(screen.queryByText('Needed.')).toBeNull();
    await press('Save wiring');
    expect((await screen.findAllByText('Needed.')).length).toBe(3);
    expect(seen.filter(({ method, path }) => method === 'POST' && path === '/rigs')).toEqual([]);
    type(await cell('Title of channel'), 'Heat');
    type(await cell('Register of Heat'), '3');
    type(await cell('Type of Heat'), 'u16');
    await press('Save wiring');
    await waitFor(() => expect(router.state.location.pathname).toBe('/rigs/kiln-1/wiring'));
    expect(seen.find(({ method, path }) => method === 'POST' && path === '/rigs')?.body).toMatchObject({
      id: 'kiln-1',
      periodMs: 100,
      connections: [{ adapter: 'modbus-tcp', configuration: { host: 'kiln.local' } }],
      channels: [{ id: 'channel', title: 'Heat', kind: 'sensor', address: { register: 3, type: 'u16' } }],
    });
  });

  it('says why it could not be loaded', async () => {
    open('test-engineer', { 'GET /adapters': () => problem(500, 'server.bug', 'A fault of the server.') });
    expect(await screen.findByText('The wiring could not be loaded')).toBeDefined();
  });
});

describe('the calibration of a sensor', () => {
  const content = {
    conversion: { kind: 'linear', gain: 2, offset: 1 },
    ...{
      calibratedOn: '2025-01-01',
      dueOn: '2026-01-01',
      expandedUncertainty: 0.2,
      certificate: 'BTS-7',
      note: '',
    },
  };
  const calibration = {
    ...{
      id: 'cal-2',
      rigId: 'burner-1',
      channel: 'o2',
      version: 2,
      status: 'in-force',
      author: 'test-engineer',
    },
    ...{ createdAt: '2025-01-02T08:00:00.000Z', endedAt: null, content, dueState: 'overdue' },
    certificateFile: { mediaType: 'application/pdf', sha256: 'ab', bytes: 2048 },
  };
  const before = { ...calibration, id: 'cal-1', version: 1, status: 'superseded', certificateFile: null };

  it('is shown with what it makes of raw values, and put in force', async () => {
    const { seen } = open('test-engineer', {
      'POST /rigs/burner-1/calibrations': ({ body }) => json({ ...calibration, ...(body as object) }, 201),
    });
    await press('Calibrate …');
    type(await screen.findByLabelText('Conversion'), 'thermocouple');
    type(await screen.findByLabelText('Its temperature, °C'), '0');
    type(await screen.findByLabelText('Try a raw value'), '4.096');
    // NIST ITS-90 Thermocouple Database (SRD 60): type K, 4.096 mV at 100 °C.
    expect((await screen.findByText(/raw 4\.096 mV reads/)).textContent).toMatch(/reads (99\.99|100)/);
    await press('Put in force');
    await waitFor(() => expect(screen.queryByText('Calibrate Oxygen in flue gas')).toBeNull());
    const made = seen.find(({ method, path }) => method === 'POST' && path.endsWith('/calibrations'));
    expect(made?.body).toMatchObject({
      channel: 'o2',
      content: { conversion: { kind: 'thermocouple', type: 'K', coldJunction: { celsius: 0 } } },
    });
  });

  it('says that it is overdue, what came before, and is withdrawn with a reason', async () => {
    const { seen } = open('safety-officer', {
      'GET /rigs/burner-1/calibrations': list(calibration, before),
      'POST /calibrations/cal-2/withdraw': () => json({ ...calibration, status: 'withdrawn' }),
    });
    expect(await screen.findByText('▲ overdue since 2026-01-01')).toBeDefined();
    expect(screen.getByText('History (1)')).toBeDefined();
    expect(screen.getByRole('link', { name: /Download \(2 kB\)/ }).getAttribute('href')).toBe(
      '/api/v1/calibrations/cal-2/certificate',
    );
    await press('Withdraw the calibration of Oxygen in flue gas');
    type(await screen.findByLabelText('Reason'), 'Sensor replaced.');
    await press('Withdraw');
    await waitFor(() =>
      expect(seen.find(({ path }) => path.endsWith('/withdraw'))?.body).toEqual({
        reason: 'Sensor replaced.',
      }),
    );
  });

  it('is amber on the page of the rig where it is overdue', async () => {
    open(
      'reader',
      { 'GET /rigs/burner-1/calibrations': list(calibration), 'GET /runs': list() },
      '/rigs/burner-1',
    );
    expect(await screen.findByText('A calibration is overdue')).toBeDefined();
  });
});

function document_(): Document {
  return window.document;
}
