import { Link } from 'react-router-dom';
import Box from '@mui/material/Box';
import { Empty, Loading, Page, ProblemNotice } from '../../components/index.js';
import type { RigDocument } from '../../api/index.js';
import { useObstacle } from '../auth/index.js';
import { useRigs, useShowsRig } from '../rigs/index.js';
import { RigCard } from './rig-card.js';

/** All rigs: state, best-known point, running step, what needs a person. */
export function FloorPage() {
  const rigs = useRigs();
  const onlyRig = rigs.data?.length === 1 ? rigs.data[0]?.id : null;
  useShowsRig(onlyRig);
  const canWire = useObstacle('rig.wire') === null;
  return (
    <Page title="Floor" actions={canWire && <Link to="/new-rig">Add a rig</Link>}>
      {rigs.isPending && <Loading what="rigs" />}
      {rigs.error !== null && (
        <ProblemNotice
          title="The rigs could not be loaded"
          error={rigs.error}
          onRetry={() => void rigs.refetch()}
        />
      )}
      {rigs.data && <Cards rigs={rigs.data} />}
    </Page>
  );
}

function Cards({ rigs }: { rigs: RigDocument[] }) {
  if (rigs.length === 0) {
    return (
      <Empty title="No rig yet">
        A test engineer adds one with <em>Add a rig</em>, or the server loads a scenario at its start.
      </Empty>
    );
  }
  return (
    <Box
      sx={{
        display: 'grid',
        gap: 2,
        gridTemplateColumns: 'repeat(auto-fill, minmax(min(100%, 36rem), 1fr))',
      }}
    >
      {rigs.map((rig) => (
        <RigCard key={rig.id} rig={rig} />
      ))}
    </Box>
  );
}
