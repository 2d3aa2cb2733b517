import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import type { StepOf } from '@cresthold/shared';
import { fieldName } from '../graph/parameter-path.js';
import { ParameterField, type ParameterFieldProps } from './parameter-field.js';

type MoveTargetsProps = Omit<ParameterFieldProps, 'step' | 'field' | 'finding'> & {
  step: StepOf<'move'>;
  findingOf: (field: string) => string | null;
};

/** Which actuators a Move ramps, and where to. */
export function MoveTargets({ step, findingOf, ...shared }: MoveTargetsProps) {
  const { targets } = step.parameters;
  const replace = (next: typeof targets) =>
    shared.onChange({ ...step, parameters: { ...step.parameters, targets: next } });
  const free = shared.channels.find(
    (channel) => channel.kind === 'actuator' && !targets.some((target) => target.channel === channel.id),
  );
  return (
    <Box component="fieldset" sx={{ border: 0, m: 0, p: 0, display: 'grid', gap: 1.5 }}>
      <Box component="legend" sx={{ p: 0, mb: 1.5, fontSize: '0.75rem', color: 'text.secondary' }}>
        Targets
      </Box>
      {targets.map((target, index) => (
        <Box key={`${index}-${target.channel}`} sx={{ display: 'grid', gap: 1.5 }}>
          {(['channel', 'value'] as const).map((part) => (
            <ParameterField
              key={part}
              {...shared}
              step={step}
              field={{
                kind: part === 'channel' ? 'actuator' : 'numeric',
                path: ['targets', index, part],
                label: part === 'channel' ? 'Actuator' : 'To',
              }}
              finding={findingOf(fieldName(['targets', index, part]))}
            />
          ))}
          {targets.length > 1 && (
            <Button
              disabled={shared.isReadOnly}
              onClick={() => replace(targets.filter((_, other) => other !== index))}
            >
              Remove this target
            </Button>
          )}
        </Box>
      ))}
      {free && (
        <Button
          disabled={shared.isReadOnly}
          onClick={() => replace([...targets, { channel: free.id, value: free.display.min }])}
        >
          Add a target
        </Button>
      )}
    </Box>
  );
}
