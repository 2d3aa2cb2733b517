import { useState, type SubmitEvent } from 'react';
import { Navigate, useNavigate } from 'react-router-dom';
import Button from '@mui/material/Button';
import TextField, { type TextFieldProps } from '@mui/material/TextField';
import { asProblem } from '../../api/index.js';
import { ProblemNotice } from '../../components/index.js';
import { useMakeFirstAdministrator, useSetupQuery } from './api/setup.js';
import { GatePage } from './gate-page.js';

const empty = { code: '', account: '', title: '', password: '' };
type FieldName = keyof typeof empty;

const fields: { name: FieldName; label: string; hint: string; props: TextFieldProps }[] = [
  {
    name: 'code',
    label: 'Set-up code',
    hint: 'The server printed it at its start.',
    props: { autoComplete: 'one-time-code', autoFocus: true },
  },
  {
    name: 'account',
    label: 'Account',
    hint: 'The short name you sign in with.',
    props: { autoComplete: 'username' },
  },
  {
    name: 'title',
    label: 'Name or role',
    hint: 'How others see you in records.',
    props: { autoComplete: 'off' },
  },
  {
    name: 'password',
    label: 'Password',
    hint: 'At least 15 characters: a few words that do not belong together.',
    props: { type: 'password', autoComplete: 'new-password' },
  },
];

/** First start: the one-time code makes the first administrator; there is no default password. */
export function SetupPage() {
  const setup = useSetupQuery();
  if (setup.data && !setup.data.isNeeded) return <Navigate to="/sign-in" replace />;
  return (
    <GatePage title="First start">
      <div>Make the first administrator. Everything else is done after signing in.</div>
      <SetupForm />
    </GatePage>
  );
}

function SetupForm() {
  const [values, setValues] = useState(empty);
  const [isTried, setTried] = useState(false);
  const make = useMakeFirstAdministrator();
  const navigate = useNavigate();
  const faultOf = (name: FieldName) => {
    if (isTried && values[name].trim() === '') return 'Fill this in.';
    return make.error ? asProblem(make.error).fieldMessage(name) : undefined;
  };
  const submit = (event: SubmitEvent) => {
    event.preventDefault();
    setTried(true);
    if (Object.values(values).some((value) => value.trim() === '')) return;
    make.mutate(values, {
      onSuccess: () => void navigate('/sign-in', { replace: true, state: { isSetUp: true } }),
    });
  };
  return (
    <form onSubmit={submit} noValidate style={{ display: 'grid', gap: 16 }}>
      {fields.map(({ name, label, hint, props }) => (
        <TextField
          key={name}
          {...props}
          label={label}
          value={values[name]}
          onChange={(event) => setValues({ ...values, [name]: event.target.value })}
          error={faultOf(name) !== undefined}
          helperText={faultOf(name) ?? hint}
        />
      ))}
      {make.error !== null && <ProblemNotice title="The administrator was not made" error={make.error} />}
      <Button type="submit" variant="contained" size="medium" disabled={make.isPending}>
        Make administrator
      </Button>
    </form>
  );
}
