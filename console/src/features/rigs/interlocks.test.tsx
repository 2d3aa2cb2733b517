import { fireEvent, screen, within } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import type { InterlockView, Role } from '@cresthold/shared';
import { demoEnvelope, demoRigDocument, demoStatus, sessionOf } from '../../testing/documents.js';
import { json, list, serve, type Handler } from '../../testing/fake-server.js';
import { renderConsole } from '../../testing/render-console.js';
import { leftText } from './left-text.js';

const view: InterlockView = {
  id: 'co-high',
  state: 'clear',
  isBypassed: false,
  bypass: null,
  isForced: false,
};
const bypass = {
  by: 'safety-officer',
  reason: 'Analyser is being calibrated.',
  untilAt: '2999-01-01T00:00:00.000Z',
};
const bypassed = { isBypassed: true, bypass };
const interlocks = demoEnvelope.content.interlocks.map((lock) => ({
  ...lock,
  protects: 'equipment' as const,
  bypassAtMostS: 3600,
}));

function open(
  role: Role,
  change: Partial<InterlockView>,
  more: Record<string, Handler> = {},
  path = '/rigs/burner-1',
) {
  const status = { ...demoStatus, interlocks: [{ ...view, ...change }] };
  const document = { ...demoRigDocument, status };
  const seen = serve({
    'GET /auth/session': () => json(sessionOf(role)),
    'GET /rigs': list(document),
    'GET /rigs/burner-1': () => json(document),
    'GET /rigs/burner-1/envelopes': list({
      ...demoEnvelope,
      content: { ...demoEnvelope.content, interlocks },
    }),
    'GET /rigs/burner-1/calibrations': list(),
    'GET /rigs/burner-1/trips': list(),
    'GET /runs': list(),
    ...more,
  });
  renderConsole(path);
  return seen;
}
const button = (name: string | RegExp) => screen.findByRole<HTMLButtonElement>('button', { name });

describe('a latched interlock', () => {
  it('is acknowledged on the rig’s page', async () => {
    const path = 'POST /rigs/burner-1/interlocks/co-high/acknowledge';
    open('technician', { state: 'latched' }, { [path]: () => json({ ...demoStatus, interlocks: [view] }) });
    expect(await screen.findByText('Open the air damper and look at the flame.')).toBeDefined();
    fireEvent.click(await button('Acknowledge Carbon monoxide high'));
    await expect.poll(() => screen.queryByRole('button', { name: /^Acknowledge/ })).toBeNull();
  });

  it('is not acknowledged by a reader, and says why', async () => {
    open('reader', { state: 'latched' });
    expect((await button('Acknowledge Carbon monoxide high')).disabled).toBe(true);
  });
});

describe('a bypass', () => {
  it('needs a time that the envelope allows and a reason', async () => {
    const path = 'POST /rigs/burner-1/interlocks/co-high/bypass';
    const seen = open(
      'safety-officer',
      {},
      {
        [path]: () => json({ ...demoStatus, interlocks: [{ ...view, ...bypassed }] }),
      },
    );
    fireEvent.click(await button('Bypass Carbon monoxide high …'));
    const dialog = within(await screen.findByRole('dialog'));
    fireEvent.change(dialog.getByLabelText('For, minutes'), { target: { value: '61' } });
    fireEvent.click(dialog.getByRole('button', { name: 'Bypass' }));
    expect(await dialog.findByText('Give a time above 0 and at most 60 minutes.')).toBeDefined();
    expect(dialog.getByText('Give a reason: it goes into the record.')).toBeDefined();
    expect(seen.some(({ method }) => method === 'POST')).toBe(false);
    fireEvent.change(dialog.getByLabelText('For, minutes'), { target: { value: '7,5' } });
    fireEvent.change(dialog.getByLabelText('Reason'), { target: { value: bypass.reason } });
    fireEvent.click(dialog.getByRole('button', { name: 'Bypass' }));
    await expect
      .poll(() => seen.find(({ method }) => method === 'POST')?.body)
      .toEqual({ forS: 450, reason: bypass.reason });
    expect(await screen.findByText(/Bypassed: Carbon monoxide high does not act, .* left/)).toBeDefined();
  });

  it('is for safety officers only', async () => {
    open('technician', {});
    expect((await button('Bypass Carbon monoxide high …')).disabled).toBe(true);
  });

  it('that runs is said on top of the rig’s page, by whom and why, and can be ended by a technician', async () => {
    const path = 'DELETE /rigs/burner-1/interlocks/co-high/bypass';
    open('technician', bypassed, { [path]: () => json({ ...demoStatus, interlocks: [view] }) });
    expect(await screen.findByText(/By safety-officer until .*Analyser is being calibrated/)).toBeDefined();
    fireEvent.click(await button('End bypass of Carbon monoxide high'));
    await expect.poll(() => screen.queryByText(/^Bypassed:/)).toBeNull();
  });

  it('that runs is said on the floor', async () => {
    open('reader', bypassed, {}, '/');
    expect(await screen.findByText(/Bypassed: Carbon monoxide high does not act/)).toBeDefined();
    expect(screen.queryByRole('button', { name: /^End bypass/ })).toBeNull();
  });
});

it('counts down in minutes and seconds, with hours where there are any', () => {
  const now = Date.parse('2026-03-01T10:00:00.000Z');
  const left = (text: string) => leftText(`2026-03-01T${text}.000Z`, now);
  expect([left('10:00:09'), left('10:10:00'), left('12:01:05'), left('09:59:59')]).toEqual([
    '0:09 left',
    '10:00 left',
    '2:01:05 left',
    'about to end',
  ]);
});
