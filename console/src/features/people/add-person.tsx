import { useState, type SubmitEvent } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import TextField from '@mui/material/TextField';
import { asProblem } from '../../api/index.js';
import { Panel, ProblemNotice } from '../../components/index.js';
import { useAddUser, type NewUser } from './api/users.js';
import { RoleChoice } from './role-choice.js';

const empty: NewUser = { account: '', title: '', roles: ['reader'], password: '' };
const texts = [
  { name: 'account', label: 'Account', hint: 'The short name for signing in.', type: 'text' },
  { name: 'title', label: 'Name or role', hint: 'As others see it in records.', type: 'text' },
  { name: 'password', label: 'First password', hint: 'At least 15 characters.', type: 'password' },
] as const;

export function AddPerson({ onClose }: { onClose: () => void }) {
  const [values, setValues] = useState(empty);
  const [isTried, setTried] = useState(false);
  const add = useAddUser();
  const problem = add.error ? asProblem(add.error) : null;
  const faultOf = (name: (typeof texts)[number]['name']) =>
    isTried && values[name].trim() === '' ? 'Fill this in.' : problem?.fieldMessage(name);
  const rolesFault =
    isTried && values.roles.length === 0 ? 'Give at least one role.' : problem?.fieldMessage('roles');
  const submit = (event: SubmitEvent) => {
    event.preventDefault();
    setTried(true);
    const isComplete = texts.every(({ name }) => values[name].trim() !== '') && values.roles.length > 0;
    if (isComplete) add.mutate(values, { onSuccess: onClose });
  };
  return (
    <Panel title="Add a person">
      <form onSubmit={submit} noValidate style={{ display: 'grid', gap: 16 }}>
        <Box sx={{ display: 'grid', gap: 2, gridTemplateColumns: { xs: '1fr', md: 'repeat(3, 1fr)' } }}>
          {texts.map(({ name, label, hint, type }) => (
            <TextField
              key={name}
              label={label}
              type={type}
              autoComplete={type === 'password' ? 'new-password' : 'off'}
              autoFocus={name === 'account'}
              value={values[name]}
              onChange={(event) => setValues({ ...values, [name]: event.target.value })}
              error={faultOf(name) !== undefined}
              helperText={faultOf(name) ?? hint}
            />
          ))}
        </Box>
        <RoleChoice
          label="Roles"
          roles={values.roles}
          onChange={(roles) => setValues({ ...values, roles })}
          fault={rolesFault}
        />
        {problem && <ProblemNotice title="The person was not added" error={problem} />}
        <Box sx={{ display: 'flex', gap: 1 }}>
          <Button type="submit" variant="contained" disabled={add.isPending}>
            Add person
          </Button>
          <Button onClick={onClose}>Cancel</Button>
        </Box>
      </form>
    </Panel>
  );
}
