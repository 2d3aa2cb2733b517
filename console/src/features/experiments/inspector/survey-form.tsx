import Button from '@mui/material/Button';
import type { StepOf } from '@cresthold/shared';
import type { ParameterPath } from '../graph/parameter-path.js';
import { newSurveyActuator, rangeFor, type StepDefaults } from '../graph/new-step.js';
import { FormSection, type FormContext } from './form-section.js';
import { of, type StepField } from './step-fields.js';

type Survey = StepOf<'survey'>;

interface SurveyFormProps extends FormContext {
  step: Survey;
  defaults: StepDefaults;
}

/** The form of a Survey over one actuator or two. */
export function SurveyForm({ step, defaults, ...context }: SurveyFormProps) {
  const { actuators } = step.parameters;
  const section = { step, ...context };
  const change = (next: Survey['parameters']['actuators']) =>
    context.onChange({ ...step, parameters: { ...step.parameters, actuators: next } });
  const free = context.channels.find(
    ({ kind, id }) => kind === 'actuator' && !actuators.some(({ channel }) => channel === id),
  );
  return (
    <>
      {actuators.map(({ channel }, index) => (
        <FormSection
          key={`${index}-${channel}`}
          legend={
            actuators.length === 1 ? 'Actuator' : index === 0 ? 'Goes back and forth' : 'Goes step by step'
          }
          fields={rangeFields(index)}
          place="parameters.actuators"
          {...section}
        >
          {actuators.length > 1 && (
            <Button
              disabled={context.isReadOnly}
              onClick={() => change(actuators.filter((_, i) => i !== index))}
            >
              Take {channel} out
            </Button>
          )}
        </FormSection>
      ))}
      {free && actuators.length < 2 && (
        <Button
          disabled={context.isReadOnly}
          onClick={() => change([...actuators, newSurveyActuator(free.id, rangeFor(free.id, defaults))])}
        >
          Add a second actuator
        </Button>
      )}
      <FormSection legend="At each point" fields={pointFields} {...section} />
    </>
  );
}

function rangeFields(index: number): StepField[] {
  const at = (name: string): ParameterPath => ['actuators', index, name];
  const unit = { of: at('channel') };
  return [
    of('actuator', at('channel'), 'Actuator'),
    of('numeric', at('from'), 'From', { unit }),
    of('numeric', at('to'), 'To', { unit }),
    of('number', at('points'), 'Points'),
    of('switch', at('isUpAndDown'), 'Up and down again', {
      help: 'The way back shows hysteresis, backlash and drift.',
    }),
  ];
}

const pointFields: StepField[] = [
  of('number', ['settleS'], 'Settle for', { unit: 's' }),
  of('number', ['averageS'], 'Then average for', { unit: 's' }),
  of('choice', ['choose'], 'The best is', {
    options: [
      { value: 'highest', label: 'the best place of all' },
      { value: 'most-prominent', label: 'the hill that stands out most' },
    ],
    help: 'A hill stands out where its top lies inside the range: what comes beyond an end is not known.',
  }),
];
