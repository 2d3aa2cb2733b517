import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import type { PreflightFault } from '@cresthold/shared';
import { Loading, Panel, ProblemNotice } from '../../../components/index.js';

interface PreflightPanelProps {
  faults: readonly PreflightFault[] | undefined;
  error: unknown;
  isChecking: boolean;
  onChoose: (stepId: string) => void;
}

/** What preflight finds, errors first; each leads to its step. */
export function PreflightPanel({ faults, error, isChecking, onChoose }: PreflightPanelProps) {
  const sorted = [...(faults ?? [])].sort((a, b) => a.severity.localeCompare(b.severity));
  return (
    <Panel title={preflightTitle(faults)}>
      {error !== null && <ProblemNotice title="Preflight could not be run" error={error} />}
      {faults === undefined && isChecking && <Loading what="preflight" />}
      {faults?.length === 0 && <Box role="status">Nothing found: it can be run.</Box>}
      {sorted.length > 0 && (
        <Box component="ul" sx={{ m: 0, p: 0, listStyle: 'none', display: 'grid', gap: 0.75 }}>
          {sorted.map((fault, index) => (
            <Box
              component="li"
              key={`${index}-${fault.code}`}
              sx={{
                display: 'flex',
                flexWrap: 'wrap',
                gap: 1,
                alignItems: 'baseline',
                fontSize: '0.8125rem',
              }}
            >
              <Box sx={{ color: 'paper.warn', fontWeight: 700, width: '5.5rem' }}>
                {fault.severity === 'error' ? '▲ Error' : '△ Warning'}
              </Box>
              <Box sx={{ flex: '1 1 14rem', minWidth: 0 }}>{fault.message}</Box>
              {fault.step !== null && <GoTo step={fault.step} onChoose={onChoose} />}
            </Box>
          ))}
        </Box>
      )}
    </Panel>
  );
}

function GoTo({ step, onChoose }: { step: string; onChoose: (stepId: string) => void }) {
  return (
    <Button sx={{ minHeight: 26, py: 0 }} onClick={() => onChoose(step)}>
      Go to {step}
    </Button>
  );
}

/** @example preflightTitle([]) // 'Preflight: nothing found' */
export function preflightTitle(faults: readonly PreflightFault[] | undefined): string {
  if (!faults) return 'Preflight';
  const errors = faults.filter((fault) => fault.severity === 'error').length;
  const warnings = faults.length - errors;
  if (faults.length === 0) return 'Preflight: nothing found';
  const count = (n: number, word: string) => `${n} ${word}${n === 1 ? '' : 's'}`;
  return `Preflight: ${count(errors, 'error')}, ${count(warnings, 'warning')}`;
}
