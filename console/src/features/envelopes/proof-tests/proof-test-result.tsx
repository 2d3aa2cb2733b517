import { useState } from 'react';
import Box from '@mui/material/Box';
import FormControlLabel from '@mui/material/FormControlLabel';
import Radio from '@mui/material/Radio';
import RadioGroup from '@mui/material/RadioGroup';
import TextField from '@mui/material/TextField';
import { asProblem, type ProofTest } from '../../../api/index.js';
import { formatInstant, GatedButton, Notice, ProblemNotice } from '../../../components/index.js';
import { useSession } from '../../auth/index.js';
import { useSignProofTest } from '../api/proof-tests.js';
import { responseText } from './proof-test-history.js';

/** What was measured, and the signature under it. */
export function ProofTestResult({ test }: { test: ProofTest }) {
  const sign = useSignProofTest(test.rigId);
  const signed = sign.data ?? (test.status === 'signed' ? test : null);
  const isSlow = test.responseMs !== null && test.responseMs > test.limitMs;
  return (
    <Box sx={{ display: 'grid', gap: 1 }}>
      <Box role="status">
        Response: <strong>{responseText(test)}</strong>
        {test.writes !== null && `; ${test.writes} actuators written`}.
      </Box>
      <Box sx={{ fontSize: '0.75rem', color: 'text.secondary' }}>
        From the beginning of the scan in which the condition became true until the device had answered the
        writes.
      </Box>
      {isSlow && <Notice kind="warn" title="It answered later than expected." />}
      {signed ? (
        <Notice kind="plain" title={`Signed as ${signed.outcome === 'pass' ? 'passed' : 'failed'}`}>
          by {signed.signedBy}, {formatInstant(signed.signedAt ?? '')}
        </Notice>
      ) : (
        <SignatureForm test={test} sign={sign} />
      )}
    </Box>
  );
}

function SignatureForm({ test, sign }: { test: ProofTest; sign: ReturnType<typeof useSignProofTest> }) {
  const { title } = useSession();
  const [outcome, setOutcome] = useState<'pass' | 'fail' | null>(null);
  const [note, setNote] = useState('');
  const noteFault = sign.error ? asProblem(sign.error).fieldMessage('note') : undefined;
  const missing =
    outcome === 'pass' && test.responseMs === null
      ? 'The interlock has not acted: it cannot have passed.'
      : null;
  const obstacle = outcome === null ? 'Say whether it passed.' : missing;
  return (
    <>
      <RadioGroup
        row
        aria-label="Outcome"
        value={outcome ?? ''}
        onChange={(_, value) => setOutcome(value === 'pass' ? 'pass' : 'fail')}
      >
        <FormControlLabel value="pass" control={<Radio size="small" />} label="Passed: it did as expected" />
        <FormControlLabel value="fail" control={<Radio size="small" />} label="Failed" />
      </RadioGroup>
      <TextField
        label="Note"
        value={note}
        onChange={(event) => setNote(event.target.value)}
        multiline
        error={noteFault !== undefined}
        helperText={noteFault ?? 'Needed for a failure and for a slow response.'}
      />
      <GatedButton
        variant="contained"
        obstacle={obstacle}
        isBusy={sign.isPending}
        onClick={() => outcome && sign.mutate({ testId: test.id, outcome, note: note.trim() })}
      >
        Sign as {title}
      </GatedButton>
      {sign.error !== null && <ProblemNotice title="Not signed" error={sign.error} />}
    </>
  );
}
