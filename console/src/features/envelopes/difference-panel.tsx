import Box from '@mui/material/Box';
import type { EnvelopeContent, Rig } from '@cresthold/shared';
import { Panel } from '../../components/index.js';
import { envelopeDifferences } from './envelope-difference.js';

interface DifferencePanelProps {
  rig: Rig;
  inForce: { version: number; content: EnvelopeContent };
  shown: EnvelopeContent;
}

/** What would change if this version came in force. */
export function DifferencePanel({ rig, inForce, shown }: DifferencePanelProps) {
  const titleOf = (id: string) => rig.channels.find((channel) => channel.id === id)?.title ?? id;
  const differences = envelopeDifferences(inForce.content, shown, titleOf);
  return (
    <Panel title={`Against version ${inForce.version} in force`}>
      {differences.length === 0 && <Box sx={{ color: 'text.secondary' }}>No difference.</Box>}
      <Box component="ul" sx={{ m: 0, p: 0, listStyle: 'none', display: 'grid', gap: 0.75 }}>
        {differences.map(({ where, before, after }) => (
          <Box component="li" key={where}>
            <Box sx={{ fontSize: '0.75rem', color: 'text.secondary' }}>{where}</Box>
            <Box component="del" sx={{ color: 'text.secondary' }}>
              {before ?? 'not there'}
            </Box>
            {' → '}
            <Box component="ins" sx={{ fontWeight: 700, textDecoration: 'none' }}>
              {after ?? 'taken away'}
            </Box>
          </Box>
        ))}
      </Box>
    </Panel>
  );
}
