import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import { Notice } from '../../components/index.js';

interface NewerNoticeProps {
  revision: number;
  isChanged: boolean;
  onTakeTheirs: () => void;
  onKeepMine: () => void;
}

/** Somebody else saved this rig since the draft was begun: nothing is lost before a person decides. */
export function NewerNotice({ revision, isChanged, onTakeTheirs, onKeepMine }: NewerNoticeProps) {
  return (
    <Notice
      kind="act"
      role="alert"
      title={`Somebody saved revision ${revision} of this rig meanwhile`}
      actions={
        <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 1 }}>
          <Button onClick={onTakeTheirs}>{isChanged ? 'Drop my draft, take theirs' : 'Show it'}</Button>
          {isChanged && <Button onClick={onKeepMine}>Keep my draft, to be saved over theirs</Button>}
        </Box>
      }
    >
      {isChanged ? 'Your draft is kept as it is until you choose.' : 'You changed nothing.'}
    </Notice>
  );
}
