import { useState } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import MenuItem from '@mui/material/MenuItem';
import TextField from '@mui/material/TextField';
import { seekingLaws, type SeekingLawId, type StepOf } from '@cresthold/shared';
import { newSeekActuator, rangeFor, type StepDefaults } from '../graph/new-step.js';
import { canPlanDithers, fitted, withLaw, withPlannedDithers } from '../graph/seek-edits.js';
import { FormSection, type FormContext } from './form-section.js';
import {
  actuatorSection,
  constraintSection,
  endSection,
  lawChoices,
  lawSection,
  wideSearchSection,
} from './seek-sections.js';

type Seek = StepOf<'seek'>;

interface SeekFormProps extends FormContext {
  step: Seek;
  defaults: StepDefaults;
}

/** The form of a Seek: its law, its actuators, and what may be added to any law. */
export function SeekForm({ step, defaults, ...context }: SeekFormProps) {
  const { law, actuators, constraint } = step.parameters;
  const section = { step, ...context };
  return (
    <>
      <LawPicker step={step} {...context} />
      <FormSection legend={seekingLaws[law.id].title} fields={lawSection(step)} {...section} />
      {actuators.map((actuator, index) => (
        <FormSection
          key={`${index}-${actuator.channel}`}
          legend={actuators.length > 1 ? `Actuator ${index + 1}: ${actuator.channel}` : 'Actuator'}
          fields={actuatorSection(step, index)}
          {...section}
        >
          {actuators.length > 1 && (
            <Button
              disabled={context.isReadOnly}
              onClick={() =>
                context.onChange(
                  withActuators(
                    step,
                    actuators.filter((_, i) => i !== index),
                  ),
                )
              }
            >
              Take {actuator.channel} out
            </Button>
          )}
        </FormSection>
      ))}
      <ActuatorActions step={step} defaults={defaults} {...context} />
      {constraint !== null && (
        <FormSection
          legend="Constraint"
          fields={constraintSection(step)}
          place="parameters.constraint"
          {...section}
        />
      )}
      <FormSection
        legend="Wide search"
        fields={wideSearchSection(step)}
        place="parameters.wideSearch.starts"
        {...section}
      />
      <FormSection legend="End" fields={endSection(step)} {...section} />
    </>
  );
}

const withActuators = (step: Seek, actuators: Seek['parameters']['actuators']): Seek => ({
  ...step,
  parameters: { ...step.parameters, actuators },
});

function LawPicker({ step, isReadOnly, onChange }: FormContext & { step: Seek }) {
  const { id } = step.parameters.law;
  const { purpose, source } = seekingLaws[id];
  return (
    <Box sx={{ display: 'grid', gap: 0.5 }}>
      <TextField
        select
        label="Seeking law"
        value={id}
        onChange={({ target }) => onChange(withLaw(step, target.value as SeekingLawId))}
        disabled={isReadOnly}
        helperText={purpose}
        fullWidth
      >
        {lawChoices.map(({ value, label }) => (
          <MenuItem key={value} value={value}>
            {label}
          </MenuItem>
        ))}
      </TextField>
      <Box sx={{ fontSize: '0.6875rem', lineHeight: 1.4, color: 'text.secondary' }}>Source: {source}</Box>
    </Box>
  );
}

/** Adds an actuator, and lets the periods of several be planned. */
function ActuatorActions({ step, defaults, isReadOnly, onChange, channels, findingOf }: SeekFormProps) {
  const [fault, setFault] = useState<string | null>(null);
  const { law, actuators } = step.parameters;
  const free = channels.find(
    ({ kind, id }) => kind === 'actuator' && !actuators.some(({ channel }) => channel === id),
  );
  const isFull = actuators.length >= seekingLaws[law.id].actuatorsMax;
  const add = (channel: string) => {
    const added = fitted(newSeekActuator(channel, rangeFor(channel, defaults)), law.id);
    onChange(withActuators(step, [...actuators, added]));
  };
  const plan = () => {
    const planned = withPlannedDithers(step, defaults.rig.periodMs / 1000);
    setFault(planned.isOk ? null : planned.message);
    if (planned.isOk) onChange(planned.step);
  };
  const said = fault ?? findingOf('parameters.actuators');
  return (
    <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 1 }}>
      {free && !isFull && (
        <Button disabled={isReadOnly} onClick={() => add(free.id)}>
          Add an actuator
        </Button>
      )}
      {canPlanDithers(step) && (
        <Button disabled={isReadOnly} onClick={plan}>
          Plan the dithers
        </Button>
      )}
      {said !== null && (
        <Box role="status" sx={{ color: 'paper.warn', flexBasis: '100%' }}>
          {said}
        </Box>
      )}
    </Box>
  );
}
