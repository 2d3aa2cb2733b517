import type { ReactNode } from 'react';
import Box from '@mui/material/Box';
import type { Channel, Step } from '@cresthold/shared';
import { fieldName } from '../graph/parameter-path.js';
import { ParameterField } from './parameter-field.js';
import type { StepField } from './step-fields.js';

/** What all fields of a step's form share. */
export interface FormContext {
  channels: readonly Channel[];
  /** What expressions of this step may name. */
  symbols: readonly string[];
  /** What preflight says of a field; null where nothing. */
  findingOf: (field: string) => string | null;
  isReadOnly: boolean;
  onChange: (step: Step) => void;
}

interface FormSectionProps extends FormContext {
  step: Step;
  legend: string;
  fields: readonly StepField[];
  /** Field under which preflight reports what is wrong with the section as a whole. */
  place?: string;
  children?: ReactNode;
}

/** Fields that belong together, under one legend. */
export function FormSection({
  step,
  legend,
  fields,
  place,
  children,
  findingOf,
  ...shared
}: FormSectionProps) {
  const finding = place === undefined ? null : findingOf(place);
  return (
    <Box
      component="fieldset"
      sx={{
        border: 0,
        borderTop: '1px solid',
        borderColor: 'divider',
        m: 0,
        p: 0,
        pt: 1,
        display: 'grid',
        gap: 1.5,
        minWidth: 0,
      }}
    >
      <Box component="legend" sx={{ p: 0, pr: 1, fontSize: '0.75rem', color: 'text.secondary' }}>
        {legend}
      </Box>
      {finding !== null && <Box sx={{ color: 'paper.warn' }}>{finding}</Box>}
      {fields.map((field) => (
        <ParameterField
          key={fieldName(field.path)}
          step={step}
          field={field}
          finding={findingOf(fieldName(field.path))}
          {...shared}
        />
      ))}
      {children}
    </Box>
  );
}
