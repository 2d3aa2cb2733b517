import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import TextField from '@mui/material/TextField';
import {
  channelIdSchema,
  expressionSymbols,
  stepKinds,
  type ExperimentGraph,
  type PreflightFault,
  type Rig,
  type Step,
} from '@cresthold/shared';
import { Empty, Panel } from '../../../components/index.js';
import { renameStep, replaceStep } from '../graph/edit-graph.js';
import { fieldName } from '../graph/parameter-path.js';
import type { StepDefaults } from '../graph/new-step.js';
import { MoveTargets } from './move-targets.js';
import { ParameterField } from './parameter-field.js';
import { SeekForm } from './seek-form.js';
import { stepFields } from './step-fields.js';
import { StepOutcomes } from './step-outcomes.js';
import { SurveyForm } from './survey-form.js';
import { useTextDraft } from './use-text-draft.js';

export interface StepInspectorProps {
  rig: Rig;
  /** What a fresh actuator of a step takes its first values from. */
  defaults: StepDefaults;
  graph: ExperimentGraph;
  step: Step | null;
  faults: readonly PreflightFault[];
  isReadOnly: boolean;
  onChange: (graph: ExperimentGraph) => void;
  onRenamed: (id: string) => void;
  onRemove: (id: string) => void;
}

/** The form of the chosen step: name, parameters, where its outcomes lead. */
export function StepInspector({ step, ...props }: StepInspectorProps) {
  if (step === null) {
    return (
      <Panel title="Step">
        <Empty title="No step is chosen">Choose one on the drawing, or add one from the palette.</Empty>
      </Panel>
    );
  }
  return <ChosenStep key={step.id} step={step} {...props} />;
}

function ChosenStep({ step, ...props }: StepInspectorProps & { step: Step }) {
  const { rig, graph, faults, isReadOnly, onChange, defaults } = props;
  const findingOf = (field: string) =>
    faults.find((fault) => fault.step === step.id && fault.field === field)?.message ?? null;
  const general = faults.filter((fault) => fault.step === step.id && fault.field === null);
  const shared = {
    channels: rig.channels,
    symbols: [...expressionSymbols(rig, graph, step.id)],
    isReadOnly,
    onChange: (next: Step) => onChange(replaceStep(graph, next)),
  };
  return (
    <Panel
      title={`Step: ${stepKinds[step.kind].title}`}
      actions={
        <Button disabled={isReadOnly} onClick={() => props.onRemove(step.id)}>
          Remove
        </Button>
      }
    >
      <Box sx={{ display: 'grid', gap: 2 }}>
        <Box sx={{ color: 'text.secondary', fontSize: '0.8125rem' }}>{stepKinds[step.kind].purpose}</Box>
        {general.map((fault) => (
          <Box key={fault.code} sx={{ color: 'paper.warn' }}>
            {fault.message}
          </Box>
        ))}
        <NameFields step={step} {...props} />
        {step.kind === 'move' && <MoveTargets step={step} findingOf={findingOf} {...shared} />}
        {step.kind === 'survey' && (
          <SurveyForm step={step} findingOf={findingOf} {...shared} defaults={defaults} />
        )}
        {step.kind === 'seek' && (
          <SeekForm step={step} findingOf={findingOf} {...shared} defaults={defaults} />
        )}
        {stepFields(step).map((field) => (
          <ParameterField
            key={fieldName(field.path)}
            step={step}
            field={field}
            finding={findingOf(fieldName(field.path))}
            {...shared}
          />
        ))}
        <StepOutcomes {...{ step, graph, findingOf, isReadOnly, onChange }} />
      </Box>
    </Panel>
  );
}

function NameFields({
  step,
  graph,
  isReadOnly,
  onChange,
  onRenamed,
}: Omit<StepInspectorProps, 'step'> & { step: Step }) {
  const title = useTextDraft(step.title, (text) => {
    if (text.length > 120) return 'At most 120 characters.';
    onChange(replaceStep(graph, { ...step, title: text.trim() }));
    return null;
  });
  const id = useTextDraft(step.id, (text) => {
    const outcome = channelIdSchema.safeParse(text.trim());
    if (!outcome.success) return outcome.error.issues[0]?.message ?? 'This name cannot be taken.';
    if (graph.steps.some((other) => other.id === outcome.data)) return 'Another step has this name already.';
    onChange(renameStep(graph, step.id, outcome.data));
    onRenamed(outcome.data);
    return null;
  });
  return (
    <>
      <TextField
        label="Title"
        value={title.text}
        onChange={(event) => title.setText(event.target.value)}
        onBlur={title.commit}
        error={title.fault !== null}
        helperText={title.fault}
        disabled={isReadOnly}
        fullWidth
      />
      <TextField
        label="Name in expressions"
        value={id.text}
        onChange={(event) => id.setText(event.target.value)}
        onBlur={id.commit}
        error={id.fault !== null}
        helperText={id.fault ?? 'Later steps name its results by it.'}
        disabled={isReadOnly}
        fullWidth
      />
    </>
  );
}
