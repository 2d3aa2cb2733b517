import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import { GatedButton, Notice, ProblemNotice } from '../../components/index.js';
import type { DraftFaults } from './draft/draft-faults.js';
import type { RigDraft } from './draft/rig-draft.js';
import type { WiringDraft } from './draft/use-wiring-draft.js';

interface SaveBarProps {
  wiring: WiringDraft;
  faults: DraftFaults;
  isTried: boolean;
  /** Why it cannot be saved now, in words; null where it can. */
  obstacle: string | null;
  /** What saving withdraws, in words; null where it withdraws nothing. */
  consequence: string | null;
  isBusy: boolean;
  error: unknown;
  onSave: () => void;
}

/** Saving, undo, and what stands in the way. */
export function SaveBar(props: SaveBarProps) {
  const { wiring, faults, isTried, obstacle, consequence, isBusy, error, onSave } = props;
  return (
    <Box sx={{ display: 'grid', gap: 1, gridTemplateColumns: 'minmax(0, 1fr)' }}>
      <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 1, alignItems: 'flex-start' }}>
        <GatedButton variant="contained" obstacle={obstacle} isBusy={isBusy} onClick={onSave}>
          Save wiring
        </GatedButton>
        <Button disabled={wiring.undo === null} onClick={wiring.undo ?? undefined}>
          Undo
        </Button>
        <Button disabled={wiring.redo === null} onClick={wiring.redo ?? undefined}>
          Redo
        </Button>
      </Box>
      {consequence !== null && (
        <Notice kind="act" role="status" title="Saving this changes what channels mean">
          {consequence}
        </Notice>
      )}
      {faults.count > 0 && (isTried || wiring.undo !== null) && (
        <FaultList faults={faults} draft={wiring.draft} isTried={isTried} />
      )}
      {error !== null && error !== undefined && (
        <ProblemNotice title="The wiring was not saved; the draft is kept" error={error} />
      )}
    </Box>
  );
}

const listed = 8;

function FaultList({ faults, draft, isTried }: { faults: DraftFaults; draft: RigDraft; isTried: boolean }) {
  const all = faults.below('');
  const count = all.length === 1 ? 'One fault' : `${all.length} faults`;
  return (
    <Notice kind="warn" role="status" title={`${isTried ? 'Not saved: ' : ''}${count} in this draft`}>
      <Box component="ul" sx={{ m: 0, pl: 2.5 }}>
        {all.slice(0, listed).map(({ field, message }) => (
          <li key={`${field}:${message}`}>
            {placeText(field, draft)}: {message}
          </li>
        ))}
        {all.length > listed && <li>and {all.length - listed} more, each at its field</li>}
      </Box>
    </Notice>
  );
}

/** E.g. `Channel 31 (o2), address.register`. */
function placeText(field: string, { rows, connections }: RigDraft): string {
  const match = /^(channels|connections)\[(\d+)\]\.?(.*)$/.exec(field);
  if (!match) return field === '' ? 'Rig' : field;
  const [, list, number = '0', rest = ''] = match;
  const index = Number(number);
  const id = list === 'channels' ? rows[index]?.['id'] : connections[index]?.id;
  const name = `${list === 'channels' ? 'Channel' : 'Connection'} ${index + 1}${id ? ` (${id})` : ''}`;
  return rest === '' ? name : `${name}, ${rest}`;
}
