import { useState } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import type { ProofTest } from '../../../api/index.js';
import { formatInstant, Loading, ProblemNotice } from '../../../components/index.js';
import { ResponsiveTable } from '../form/responsive-table.js';
import { useProofTests } from '../api/proof-tests.js';

/** The record of proof tests; read when it is asked for. */
export function ProofTestHistory({ rigId }: { rigId: string }) {
  const [isShown, setShown] = useState(false);
  const tests = useProofTests(rigId, isShown);
  return (
    <Box sx={{ display: 'grid', gap: 1, gridTemplateColumns: 'minmax(0, 1fr)' }}>
      <Box>
        <Button size="small" aria-pressed={isShown} onClick={() => setShown(!isShown)}>
          Record of proof tests
        </Button>
      </Box>
      {isShown && tests.isPending && <Loading what="proof tests" />}
      {isShown && tests.error !== null && (
        <ProblemNotice title="The proof tests could not be loaded" error={tests.error} />
      )}
      {isShown && tests.data?.length === 0 && <span>No proof test yet.</span>}
      {isShown && tests.data && tests.data.length > 0 && (
        <ResponsiveTable
          label="Record of proof tests"
          minWidthPx={760}
          heads={['Interlock', 'Began', 'Method', 'Response', 'Outcome', 'Signed', 'Note']}
          rows={tests.data.map((test) => [
            test.title,
            `${formatInstant(test.startedAt)}, version ${test.envelopeVersion}`,
            test.method === 'forced' ? 'forced' : 'made real',
            responseText(test),
            test.outcome ?? test.status,
            test.signedBy !== null && test.signedAt !== null
              ? `${test.signedBy}, ${formatInstant(test.signedAt)}`
              : '—',
            test.note ?? '',
          ])}
        />
      )}
    </Box>
  );
}

/** The measured response beside what is expected at most. */
export function responseText({ responseMs, limitMs }: ProofTest): string {
  const expected = `at most ${Math.round(limitMs)} ms expected`;
  return responseMs === null ? `none yet, ${expected}` : `${responseMs.toFixed(1)} ms, ${expected}`;
}
