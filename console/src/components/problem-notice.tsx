import Button from '@mui/material/Button';
import { asProblem } from '../api/index.js';
import { Notice } from './notice.js';

interface ProblemNoticeProps {
  /** What was tried, e.g. "The rigs could not be loaded". */
  title: string;
  error: unknown;
  onRetry?: () => void;
}

/** A failure in the panel that it belongs to: what was tried, why not, and the fields at fault. */
export function ProblemNotice({ title, error, onRetry }: ProblemNoticeProps) {
  const problem = asProblem(error);
  return (
    <Notice
      kind="warn"
      role="alert"
      title={title}
      actions={onRetry && <Button onClick={onRetry}>Try again</Button>}
    >
      {problem.message}
      {problem.fields.length > 0 && (
        <ul style={{ margin: '4px 0 0', paddingLeft: '1.25rem' }}>
          {problem.fields.map((fault) => (
            <li key={`${fault.field}:${fault.message}`}>
              {fault.field === '' ? fault.message : `${fault.field}: ${fault.message}`}
            </li>
          ))}
        </ul>
      )}
    </Notice>
  );
}
