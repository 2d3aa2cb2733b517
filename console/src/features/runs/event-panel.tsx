import { useState } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import type { RunEvent } from '@cresthold/shared';
import { formatNumber, Panel } from '../../components/index.js';
import { eventText, eventWeight } from './event-text.js';

const colours = { trip: 'paper.trip', warn: 'paper.warn', plain: 'text.primary', detail: 'text.secondary' };
const shownAtOnce = 60;

/** The events of a run, newest first; survey points only when asked for. */
export function EventPanel({ events }: { events: readonly RunEvent[] }) {
  const [isDetailed, setDetailed] = useState(false);
  const [limit, setLimit] = useState(shownAtOnce);
  const wanted = events.filter(({ body }) => isDetailed || eventWeight(body) !== 'detail').reverse();
  return (
    <Panel
      title="Events"
      actions={
        <Button
          aria-pressed={isDetailed}
          variant={isDetailed ? 'contained' : 'outlined'}
          onClick={() => setDetailed(!isDetailed)}
        >
          Survey points
        </Button>
      }
    >
      <Box
        component="ol"
        aria-label="Events, newest first"
        sx={{ m: 0, p: 0, listStyle: 'none', display: 'grid', gap: 0.5, fontSize: '0.8125rem' }}
      >
        {wanted.slice(0, limit).map((event) => (
          <Box component="li" key={event.sequence} sx={{ display: 'flex', gap: 1.5 }}>
            <Box
              component="span"
              title={event.at}
              sx={{ color: 'text.secondary', minWidth: '9ch', textAlign: 'right' }}
            >
              {formatNumber(event.tS, 1)} s
            </Box>
            <Box component="span" sx={{ flex: 1, minWidth: 0, color: colours[eventWeight(event.body)] }}>
              {eventText(event.body)}
            </Box>
          </Box>
        ))}
      </Box>
      {wanted.length === 0 && <Box sx={{ color: 'text.secondary' }}>Nothing has happened yet.</Box>}
      {wanted.length > limit && (
        <Button sx={{ mt: 1 }} onClick={() => setLimit(limit + 200)}>
          Show {Math.min(200, wanted.length - limit)} more of {wanted.length}
        </Button>
      )}
    </Panel>
  );
}
