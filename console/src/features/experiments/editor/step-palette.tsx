import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import { stepKinds, type StepKind } from '@cresthold/shared';
import { Panel } from '../../../components/index.js';

interface StepPaletteProps {
  /** Kinds that cannot be added now, e.g. a second Start. */
  unavailable: ReadonlySet<StepKind>;
  isReadOnly: boolean;
  onAdd: (kind: StepKind) => void;
}

/** Every step kind; a press adds one beside the chosen step and leads to it. */
export function StepPalette({ unavailable, isReadOnly, onAdd }: StepPaletteProps) {
  return (
    <Panel title="Add a step">
      <Box
        component="ul"
        sx={{
          m: 0,
          p: 0,
          listStyle: 'none',
          display: 'grid',
          gap: 1,
          gridTemplateColumns: { xs: 'repeat(2, minmax(0, 1fr))', lg: 'minmax(0, 1fr)' },
        }}
      >
        {(Object.keys(stepKinds) as StepKind[]).map((kind) => (
          <li key={kind}>
            <Button
              fullWidth
              disabled={isReadOnly || unavailable.has(kind)}
              onClick={() => onAdd(kind)}
              sx={{ display: 'block', textAlign: 'left', whiteSpace: 'normal', px: 1, py: 0.5 }}
            >
              <Box sx={{ fontWeight: 700 }}>{stepKinds[kind].title}</Box>
              <Box sx={{ fontSize: '0.6875rem', lineHeight: 1.3, color: 'text.secondary' }}>
                {stepKinds[kind].purpose}
              </Box>
            </Button>
          </li>
        ))}
      </Box>
    </Panel>
  );
}
