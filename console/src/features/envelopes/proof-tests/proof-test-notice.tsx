import { Link as RouterLink } from 'react-router-dom';
import Link from '@mui/material/Link';
import type { EnvelopeContent } from '@cresthold/shared';
import { Notice } from '../../../components/index.js';
import { useProofTestDues } from '../api/proof-tests.js';
import { dueText, forbidsArming, isPressing } from './due-text.js';

interface ProofTestNoticeProps {
  rigId: string;
  inForce: EnvelopeContent | undefined;
}

/** Proof tests that are due or overdue; nothing while all are in date. */
export function ProofTestNotice({ rigId, inForce }: ProofTestNoticeProps) {
  const dues = useProofTestDues(rigId, inForce).data?.filter(isPressing) ?? [];
  if (dues.length === 0) return null;
  const isForbidden = dues.some(forbidsArming);
  return (
    <Notice
      kind={isForbidden ? 'act' : 'warn'}
      title={isForbidden ? 'Proof tests forbid arming' : 'Proof tests fall due'}
    >
      <ul style={{ margin: 0, paddingLeft: '1.25rem' }}>
        {dues.map((due) => (
          <li key={due.interlock}>
            {due.title}: {dueText(due)}
          </li>
        ))}
      </ul>
      <Link component={RouterLink} to={`/rigs/${rigId}/envelope`}>
        Do them on the envelope’s page
      </Link>
    </Notice>
  );
}
