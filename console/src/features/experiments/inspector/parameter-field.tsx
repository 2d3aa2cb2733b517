import Autocomplete from '@mui/material/Autocomplete';
import FormControlLabel from '@mui/material/FormControlLabel';
import FormHelperText from '@mui/material/FormHelperText';
import InputAdornment from '@mui/material/InputAdornment';
import MenuItem from '@mui/material/MenuItem';
import Switch from '@mui/material/Switch';
import TextField from '@mui/material/TextField';
import type { Channel, Step } from '@cresthold/shared';
import { valueAt } from '../graph/parameter-path.js';
import { changeParameter, fieldText, readField } from './read-field.js';
import type { StepField } from './step-fields.js';
import { useTextDraft } from './use-text-draft.js';

export interface ParameterFieldProps {
  step: Step;
  field: StepField;
  channels: readonly Channel[];
  /** What expressions of this step may name. */
  symbols: readonly string[];
  /** What preflight says of this field; null where nothing. */
  finding: string | null;
  isReadOnly: boolean;
  onChange: (step: Step) => void;
}

/** One field of a step's form, by its kind. */
export function ParameterField(props: ParameterFieldProps) {
  switch (props.field.kind) {
    case 'switch':
    case 'presence':
      return <SwitchField {...props} />;
    case 'actuator':
    case 'channel':
      return <ChannelField {...props} />;
    case 'choice':
      return <ChoiceField {...props} />;
    case 'numeric':
    case 'optional-numeric':
    case 'expression':
    case 'optional-expression':
      return <ExpressionField {...props} />;
    case 'number':
    case 'optional-number':
      return <TextParameter {...props} />;
  }
}

function useParameter({ step, field, onChange }: ParameterFieldProps) {
  const take = (value: unknown): string | null => {
    const outcome = changeParameter(step, field.path, value);
    if (outcome.isOk) onChange(outcome.step);
    return outcome.isOk ? null : outcome.message;
  };
  return { value: valueAt(step.parameters, field.path), take };
}

function useParameterText(props: ParameterFieldProps) {
  const { value, take } = useParameter(props);
  return useTextDraft(fieldText(value), (text) => {
    const read = readField(props.field.kind, text);
    return read.isOk ? take(read.value) : read.message;
  });
}

function unitOf({ field, step, channels }: ParameterFieldProps): string {
  if (typeof field.unit !== 'object') return field.unit ?? '';
  const id = valueAt(step.parameters, field.unit.of);
  const unit = channels.find((channel) => channel.id === id)?.unit ?? '';
  return field.unit.per === undefined ? unit : `${unit} / ${field.unit.per}`.trim();
}

const onEnter = (commit: () => void) => (event: { key: string }) => {
  if (event.key === 'Enter') commit();
};

function TextParameter(props: ParameterFieldProps) {
  const draft = useParameterText(props);
  const fault = draft.fault ?? props.finding;
  const unit = unitOf(props);
  return (
    <TextField
      label={props.field.label}
      value={draft.text}
      onChange={(event) => draft.setText(event.target.value)}
      onBlur={draft.commit}
      onKeyDown={onEnter(draft.commit)}
      disabled={props.isReadOnly}
      error={fault !== null}
      helperText={fault ?? props.field.help}
      fullWidth
      slotProps={{
        htmlInput: { inputMode: 'decimal', autoComplete: 'off' },
        input: unit === '' ? {} : { endAdornment: <InputAdornment position="end">{unit}</InputAdornment> },
      }}
    />
  );
}

/** The name that is being typed at the end of a text: `survey.be` of `2 + survey.be`. */
export function lastName(text: string): string {
  return /[a-zA-Z][a-zA-Z0-9.]*$/.exec(text)?.[0] ?? '';
}

function ExpressionField(props: ParameterFieldProps) {
  const draft = useParameterText(props);
  const fault = draft.fault ?? props.finding;
  const unit = unitOf(props);
  return (
    <Autocomplete
      freeSolo
      disableClearable
      options={[...props.symbols]}
      value={draft.text}
      inputValue={draft.text}
      filterOptions={(options) => {
        const name = lastName(draft.text);
        return name === ''
          ? []
          : options.filter((option) => option !== name && option.includes(name)).slice(0, 12);
      }}
      onInputChange={(_event, text, cause) => {
        if (cause === 'input') draft.setText(text);
      }}
      onChange={(_event, option, cause) => {
        if (cause !== 'selectOption') return;
        draft.setText(draft.text.slice(0, draft.text.length - lastName(draft.text).length) + option);
      }}
      disabled={props.isReadOnly}
      renderInput={(params) => (
        <TextField
          {...params}
          label={props.field.label}
          onBlur={draft.commit}
          onKeyDown={onEnter(draft.commit)}
          error={fault !== null}
          helperText={fault ?? props.field.help}
          slotProps={{
            ...params.slotProps,
            input: {
              ...params.slotProps.input,
              endAdornment: unit === '' ? undefined : <InputAdornment position="end">{unit}</InputAdornment>,
            },
          }}
        />
      )}
    />
  );
}

function ChannelField(props: ParameterFieldProps) {
  const { value, take } = useParameter(props);
  const isFitting = (channel: Channel) => props.field.kind === 'channel' || channel.kind === 'actuator';
  const chosen = fieldText(value);
  const options = props.channels.filter(isFitting);
  const isKnown = options.some((channel) => channel.id === chosen);
  return (
    <TextField
      select
      label={props.field.label}
      value={isKnown ? chosen : ''}
      onChange={(event) => take(event.target.value)}
      disabled={props.isReadOnly}
      error={props.finding !== null || !isKnown}
      helperText={props.finding ?? (isKnown ? undefined : `The rig has no such channel: "${chosen}".`)}
      fullWidth
    >
      {options.map((channel) => (
        <MenuItem key={channel.id} value={channel.id}>
          {channel.title} ({channel.id})
        </MenuItem>
      ))}
    </TextField>
  );
}

function ChoiceField(props: ParameterFieldProps) {
  const { value, take } = useParameter(props);
  const { label, help, options = [], whenEmpty = '', chosen, valueOf } = props.field;
  return (
    <TextField
      select
      label={label}
      value={chosen ?? (fieldText(value) || whenEmpty)}
      onChange={({ target }) => take(valueOf ? valueOf(target.value) : target.value)}
      disabled={props.isReadOnly}
      error={props.finding !== null}
      helperText={props.finding ?? help}
      fullWidth
    >
      {options.map((option) => (
        <MenuItem key={option.value} value={option.value}>
          {option.label}
        </MenuItem>
      ))}
    </TextField>
  );
}

function SwitchField(props: ParameterFieldProps) {
  const { value, take } = useParameter(props);
  const isPresence = props.field.kind === 'presence';
  const isOn = isPresence ? value !== null : value === true;
  const switchTo = (on: boolean) => take(isPresence ? (on ? props.field.whenOn : null) : on);
  return (
    <div>
      <FormControlLabel
        label={props.field.label}
        control={
          <Switch
            checked={isOn}
            onChange={(event) => switchTo(event.target.checked)}
            disabled={props.isReadOnly}
          />
        }
      />
      {props.field.help !== undefined && <FormHelperText>{props.field.help}</FormHelperText>}
    </div>
  );
}
