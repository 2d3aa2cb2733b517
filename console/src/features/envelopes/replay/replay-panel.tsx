import { useState } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import type { EnvelopeContent, Rig } from '@cresthold/shared';
import { Empty, Notice, Panel, ProblemNotice } from '../../../components/index.js';
import { useReplay } from '../api/envelope-replay.js';
import { ReplayedRun } from './replayed-run.js';
import { RunChoice } from './run-choice.js';

const lastRuns = 5;

interface ReplayPanelProps {
  rig: Rig;
  version: number;
  /** As it is now, saved or not. */
  content: EnvelopeContent;
}

/** Tries a version on recorded runs: what would have acted, when, and how near the rest was. */
export function ReplayPanel({ rig, version, content }: ReplayPanelProps) {
  const replay = useReplay(rig.id);
  const [isChoosing, setChoosing] = useState(false);
  const [chosen, setChosen] = useState<readonly string[]>([]);
  const runIds = isChoosing && chosen.length > 0 ? [...chosen] : null;
  const { data } = replay;
  return (
    <Panel title={`Replay of version ${version} on recorded runs`}>
      <Box sx={{ display: 'grid', gap: 1.5, gridTemplateColumns: 'minmax(0, 1fr)' }}>
        <Box sx={{ fontSize: '0.8125rem', color: 'text.secondary' }}>
          What this version would have done in runs that were recorded under others. It changes nothing, and
          it is no proof of what it will do: a run that would have been stopped earlier would have gone on
          differently.
        </Box>
        <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 1 }}>
          <Button
            variant="contained"
            disabled={replay.isPending}
            onClick={() => replay.mutate({ content, runIds, lastRuns })}
          >
            {replay.isPending ? 'Replaying …' : buttonText(runIds)}
          </Button>
          <Button aria-pressed={isChoosing} onClick={() => setChoosing(!isChoosing)}>
            Choose runs …
          </Button>
        </Box>
        {isChoosing && <RunChoice rigId={rig.id} chosen={chosen} onChange={setChosen} />}
        {replay.error !== null && <ProblemNotice title="Not replayed" error={replay.error} />}
        {data?.runs.length === 0 && <Empty title="This rig has no ended run to replay it on." />}
        {data && replay.variables.content !== content && (
          <Notice kind="warn" title="The draft has changed since: replay it again." />
        )}
        {data?.runs.map((run) => (
          <ReplayedRun key={run.runId} run={run} rig={rig} />
        ))}
      </Box>
    </Panel>
  );
}

function buttonText(runIds: readonly string[] | null): string {
  if (runIds === null) return `Replay on the last ${lastRuns} runs`;
  return runIds.length === 1 ? 'Replay on the chosen run' : `Replay on ${runIds.length} chosen runs`;
}
