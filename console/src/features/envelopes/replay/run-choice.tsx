import Box from '@mui/material/Box';
import Checkbox from '@mui/material/Checkbox';
import FormControlLabel from '@mui/material/FormControlLabel';
import { formatMoment, Loading, ProblemNotice } from '../../../components/index.js';
import { useReplayableRuns } from '../api/envelope-replay.js';

interface RunChoiceProps {
  rigId: string;
  chosen: readonly string[];
  onChange: (chosen: readonly string[]) => void;
}

/** The last ended runs of a rig, to choose from; none chosen means the last five. */
export function RunChoice({ rigId, chosen, onChange }: RunChoiceProps) {
  const runs = useReplayableRuns(rigId, true);
  const toggle = (id: string) =>
    onChange(chosen.includes(id) ? chosen.filter((other) => other !== id) : [...chosen, id]);
  return (
    <Box component="fieldset" sx={{ m: 0, border: 1, borderColor: 'divider', display: 'grid' }}>
      <legend>Runs</legend>
      {runs.isPending && <Loading what="runs" />}
      {runs.error !== null && <ProblemNotice title="The runs could not be loaded" error={runs.error} />}
      {runs.data?.length === 0 && <span>No run has ended yet.</span>}
      {runs.data?.map(({ id, experimentTitle, startedAt, status }) => (
        <FormControlLabel
          key={id}
          control={<Checkbox size="small" checked={chosen.includes(id)} onChange={() => toggle(id)} />}
          label={`${experimentTitle}, ${formatMoment(startedAt)}, ${status}`}
        />
      ))}
    </Box>
  );
}
