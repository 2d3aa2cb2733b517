import Box from '@mui/material/Box';
import MenuItem from '@mui/material/MenuItem';
import TextField from '@mui/material/TextField';
import { stepKinds, type ExperimentGraph, type Step } from '@cresthold/shared';
import { connect, disconnect, targetOf } from '../graph/edit-graph.js';

interface StepOutcomesProps {
  step: Step;
  graph: ExperimentGraph;
  findingOf: (field: string) => string | null;
  isReadOnly: boolean;
  onChange: (graph: ExperimentGraph) => void;
}

const nowhere = '';

/** Where each outcome of a step leads: the way to connect without a mouse. */
export function StepOutcomes({ step, graph, findingOf, isReadOnly, onChange }: StepOutcomesProps) {
  const { ports, optionalPorts } = stepKinds[step.kind];
  if (ports.length === 0) return null;
  const targets = graph.steps.filter((other) => other.id !== step.id && other.kind !== 'start');
  return (
    <Box component="fieldset" sx={{ border: 0, m: 0, p: 0, display: 'grid', gap: 1.5 }}>
      <Box component="legend" sx={{ p: 0, mb: 1.5, fontSize: '0.75rem', color: 'text.secondary' }}>
        Leads to
      </Box>
      {ports.map((port) => {
        const finding = findingOf(`ports.${port}`);
        return (
          <TextField
            key={port}
            select
            label={optionalPorts.includes(port) ? `${port} (may be left open)` : port}
            value={targetOf(graph, step.id, port) ?? nowhere}
            onChange={({ target }) =>
              onChange(
                target.value === nowhere
                  ? disconnect(graph, step.id, port)
                  : connect(graph, step.id, port, target.value),
              )
            }
            disabled={isReadOnly}
            error={finding !== null}
            helperText={finding}
            fullWidth
          >
            <MenuItem value={nowhere}>nowhere</MenuItem>
            {targets.map((target) => (
              <MenuItem key={target.id} value={target.id}>
                {target.title || target.id}
              </MenuItem>
            ))}
          </TextField>
        );
      })}
    </Box>
  );
}
