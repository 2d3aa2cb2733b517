import { act, fireEvent, screen } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import { demoEnvelope, demoRig, demoRigDocument, demoStatus, sessionOf } from '../../../testing/documents.js';
import { json, list, serve } from '../../../testing/fake-server.js';
import { renderConsole } from '../../../testing/render-console.js';

const flame = {
  kind: 'trace' as const,
  id: 'flame',
  title: 'Flame image',
  unit: 'mV',
  display: { min: 0, max: 10, decimals: 1 },
  connection: 'plc',
  address: { points: 4 },
  axis: { title: 'Height', unit: 'mm', from: 0, step: 2 },
};

function openRig() {
  const content = { ...demoRig, channels: [...demoRig.channels, flame] };
  const document = { ...demoRigDocument, content, status: demoStatus };
  serve({
    'GET /auth/session': () => json(sessionOf('reader')),
    'GET /rigs': list(document),
    'GET /rigs/burner-1': () => json(document),
    'GET /rigs/burner-1/calibrations': list(),
    'GET /rigs/burner-1/envelopes': list(demoEnvelope),
    'GET /rigs/burner-1/trips': list(),
    'GET /runs': list(),
  });
  return renderConsole('/rigs/burner-1');
}
const message = (points: number[]) => ({
  type: 'trace' as const,
  trace: {
    ...{ rigId: 'burner-1', runId: null, channel: 'flame', atMs: Date.now(), tS: null },
    ...{ count: points.length, points, places: null },
  },
});

describe('the live traces of a rig', () => {
  it('say that none has come, then show the newest in words', async () => {
    const { say } = openRig();
    expect(await screen.findByText(/No trace yet/)).toBeDefined();
    await act(() => say(message([0, 4, 2, 1])));
    await act(() => say(message([0, 1, 6, 1])));
    const words = '4 points from 0 to 6 mm; least 0.0 mV; greatest 6.0 mV at 4 mm.';
    expect(await screen.findByText(words)).toBeDefined();
    expect(screen.getByRole('img', { name: `Flame image over Height. ${words}` })).toBeDefined();
    expect(screen.queryByText('Not fresh')).toBeNull();
  });

  it('stand still while they are paused', async () => {
    const { say } = openRig();
    await screen.findByText(/No trace yet/);
    await act(() => say(message([0, 4])));
    const panel = (await screen.findByText(/greatest 4.0 mV/)).closest('section') as HTMLElement;
    const pause = [...panel.querySelectorAll('button')].find((b) => b.textContent === 'Pause');
    fireEvent.click(pause as HTMLElement);
    await act(() => say(message([0, 9])));
    expect(screen.queryByText(/greatest 9.0 mV/)).toBeNull();
    fireEvent.click(pause as HTMLElement);
    expect(await screen.findByText(/greatest 9.0 mV/)).toBeDefined();
  });

  it('are no strip chart over time, and are not among the actuators', async () => {
    openRig();
    await screen.findByText(/No trace yet/);
    expect(screen.getAllByRole('heading', { name: 'Flame image' })).toHaveLength(1);
    expect(screen.queryByLabelText(/Move Flame image/)).toBeNull();
  });
});
