import { Link, useParams } from 'react-router-dom';
import type { AdapterDocument, RigDocument } from '../../api/index.js';
import { Loading, Page, ProblemNotice } from '../../components/index.js';
import { useRigStatus } from '../../live/index.js';
import { useAdapters } from '../adapters/index.js';
import { useObstacle } from '../auth/index.js';
import { CalibrationPanel } from '../calibrations/index.js';
import { useRig, useShowsRig } from '../rigs/index.js';
import { BudgetPanel } from './budget-panel.js';
import { ChannelsPanel } from './channels/channels-panel.js';
import { ConnectionsPanel } from './connections/connections-panel.js';
import { LeaveGuard } from './leave-guard.js';
import { NewerNotice } from './newer-notice.js';
import { RigFields } from './rig-fields.js';
import { SaveBar } from './save-bar.js';
import { useWiringEditor } from './use-wiring-editor.js';

/** Connections and channels of a rig: wired, judged, tested, calibrated. */
export function WiringPage() {
  const { rigId = '' } = useParams();
  useShowsRig(rigId);
  const rig = useRig(rigId);
  const adapters = useAdapters();
  if (rig.data && adapters.data) {
    return <WiringEditor key={rigId} rig={rig.data} adapters={adapters.data} />;
  }
  return <NotThere title="Wiring" queries={[rig, adapters]} />;
}

/** The same page with nothing in it yet. */
export function NewRigPage() {
  const adapters = useAdapters();
  if (adapters.data) return <WiringEditor rig={null} adapters={adapters.data} />;
  return <NotThere title="New rig" queries={[adapters]} />;
}

interface Query {
  isPending: boolean;
  error: unknown;
  refetch: () => unknown;
}

function NotThere({ title, queries }: { title: string; queries: readonly Query[] }) {
  const failed = queries.find(({ error }) => error !== null);
  return (
    <Page title={title}>
      {failed ? (
        <ProblemNotice
          title="The wiring could not be loaded"
          error={failed.error}
          onRetry={() => void failed.refetch()}
        />
      ) : (
        <Loading what="wiring" />
      )}
    </Page>
  );
}

function WiringEditor({ rig, adapters }: { rig: RigDocument | null; adapters: AdapterDocument[] }) {
  const status = useRigStatus(rig?.id ?? '', rig?.status ?? null);
  const editor = useWiringEditor(rig, adapters, status);
  const isReadOnly = useObstacle('rig.wire') !== null;
  const { wiring, faults, newer } = editor;
  const shared = { wiring, faults, isReadOnly };
  return (
    <Page
      title={rig ? `Wiring of ${rig.content.title}` : 'New rig'}
      trail={<Link to={rig ? `/rigs/${rig.id}` : '/'}>{rig ? rig.content.title : 'Floor'}</Link>}
      lead="Connections, channels and calibration. Saved wiring is read at once; nothing is written to an actuator before an approved envelope is in force and the rig is armed."
    >
      <LeaveGuard isChanged={editor.isChanged} />
      {newer && (
        <NewerNotice
          revision={newer.revision}
          isChanged={editor.isChanged}
          onTakeTheirs={() => editor.takeTheirs(newer)}
          onKeepMine={() => editor.keepMine(newer)}
        />
      )}
      <SaveBar
        wiring={wiring}
        faults={faults}
        isTried={editor.isTried}
        obstacle={editor.obstacle}
        consequence={editor.consequence}
        isBusy={editor.isSaving}
        error={editor.saveError}
        onSave={editor.save}
      />
      <RigFields {...shared} isNew={rig === null} />
      <BudgetPanel
        budget={editor.budget.data}
        error={editor.budget.error}
        isStale={!editor.isSettled}
        status={status}
      />
      <ConnectionsPanel {...shared} adapters={adapters} isTried={editor.isTried} status={status} />
      <ChannelsPanel {...shared} columnsOf={editor.columnsOf} saved={editor.saved} />
      {rig && <CalibrationPanel rig={rig.content} phase={status?.phase ?? 'offline'} />}
    </Page>
  );
}
