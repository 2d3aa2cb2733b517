import { useParams, useSearchParams } from 'react-router-dom';
import type { ExperimentSummary } from '../../api/index.js';
import { Loading, Page, ProblemNotice } from '../../components/index.js';
import { useEnvelopeInForce } from '../envelopes/index.js';
import { useRigObjectives } from '../objectives/index.js';
import { useRig, useShowsRig } from '../rigs/index.js';
import { useExperiment, useExperimentVersion } from './api/experiment-queries.js';
import { ExperimentEditor } from './editor/experiment-editor.js';

/** One experiment in its editor: the latest version, or the one that the address names. */
export function ExperimentPage() {
  const { experimentId = '' } = useParams();
  const experiment = useExperiment(experimentId);
  if (experiment.data) return <LoadedExperiment experiment={experiment.data} />;
  return <Waiting error={experiment.error} onRetry={() => void experiment.refetch()} />;
}

function LoadedExperiment({ experiment }: { experiment: ExperimentSummary }) {
  const [search] = useSearchParams();
  const { id, rigId } = experiment;
  const asked = Number(search.get('version'));
  const version = useExperimentVersion(id, asked > 0 ? asked : experiment.latestVersion);
  const rig = useRig(rigId);
  const objectives = useRigObjectives(rigId);
  const envelope = useEnvelopeInForce(rigId);
  useShowsRig(rigId);
  if (version.data && rig.data && objectives.data) {
    return (
      <ExperimentEditor
        key={`${id}/${version.data.version}`}
        experiment={experiment}
        version={version.data}
        rig={rig.data.content}
        envelope={envelope?.content}
        objectives={objectives.data}
      />
    );
  }
  const error = version.error ?? rig.error ?? objectives.error;
  return <Waiting error={error} onRetry={() => void version.refetch()} />;
}

function Waiting({ error, onRetry }: { error: unknown; onRetry: () => void }) {
  return (
    <Page title="Experiment">
      {error === null ? (
        <Loading what="experiment" />
      ) : (
        <ProblemNotice title="The experiment could not be loaded" error={error} onRetry={onRetry} />
      )}
    </Page>
  );
}
