import { screen } from '@testing-library/react';
import { expect, it } from 'vitest';
import { sessionOf } from '../../testing/documents.js';
import { json, list, serve } from '../../testing/fake-server.js';
import { renderConsole } from '../../testing/render-console.js';

const modbus = {
  id: 'modbus-tcp',
  title: 'Modbus TCP',
  version: '0.1.0',
  contract: '^1.1.0',
  origin: 'shipped',
  reference: null,
  state: 'ready',
  error: null,
  configurationSchema: {
    type: 'object',
    properties: {
      host: { type: 'string', title: 'Host', description: 'Name or address.' },
      port: { type: 'integer', title: 'Port', default: 502 },
    },
    required: ['host'],
  },
  addressSchema: { type: 'object', properties: { table: { type: 'string', enum: ['coil', 'register'] } } },
};

const broken = {
  ...modbus,
  id: null,
  title: '/opt/bath-adapter',
  version: null,
  contract: null,
  origin: 'plug-in',
  reference: '/opt/bath-adapter',
  state: 'broken',
  error: { code: 'plug-in.not-loaded', message: 'It failed: no licence.', details: [] },
  configurationSchema: null,
  addressSchema: null,
};

it('shows what each adapter must be told, and why a broken plug-in is left out', async () => {
  serve({
    'GET /auth/session': () => json(sessionOf('administrator')),
    'GET /rigs': list(),
    'GET /adapters': list(modbus, broken),
  });
  renderConsole('/adapters');
  expect(await screen.findByRole('heading', { name: 'Modbus TCP' })).toBeDefined();
  expect(screen.getByRole('link', { name: 'Adapters' }).getAttribute('href')).toBe('/adapters');
  const items = screen.getAllByRole('listitem', { hidden: true }).map((item) => item.textContent);
  expect(items).toEqual(
    expect.arrayContaining([
      'Host (host, text, needed): Name or address.',
      'Port (port, number, else 502)',
      'Table (table, coil | register)',
    ]),
  );
  expect(screen.getByText('A plug-in is broken')).toBeDefined();
  expect(screen.getByText(/It failed: no licence\./).textContent).toContain('plug-in.not-loaded');
  expect(screen.getAllByText('/opt/bath-adapter').length).toBeGreaterThan(0);
});
