import { useParams, useSearchParams } from 'react-router-dom';
import { Loading, Page, ProblemNotice } from '../../components/index.js';
import { useEnvelopeInForce } from '../envelopes/index.js';
import { useRigObjectives } from '../objectives/index.js';
import { useRig, useShowsRig } from '../rigs/index.js';
import { useExperiment, useExperimentVersion } from './api/experiment-queries.js';
import { ExperimentEditor } from './editor/experiment-editor.js';

/** One experiment in its editor: the latest version, or the one that the address names. */
export function ExperimentPage() {
  const { experimentId = '' } = useParams();
  const [search] = useSearchParams();
  const experiment = useExperiment(experimentId);
  const asked = Number(search.get('version'));
  const number = asked > 0 ? asked : (experiment.data?.latestVersion ?? null);
  const version = useExperimentVersion(experimentId, number);
  const rigId = experiment.data?.rigId ?? '';
  const rig = useRig(rigId);
  const objectives = useRigObjectives(rigId);
  const envelope = useEnvelopeInForce(rigId);
  useShowsRig(experiment.data?.rigId ?? null);
  const error = experiment.error ?? version.error ?? (experiment.data ? rig.error : null);
  if (experiment.data && version.data && rig.data && objectives.data) {
    return (
      <ExperimentEditor
        key={`${experimentId}/${version.data.version}`}
        experiment={experiment.data}
        version={version.data}
        rig={rig.data.content}
        envelope={envelope?.content}
        objectives={objectives.data}
      />
    );
  }
  return (
    <Page title="Experiment">
      {error === null ? (
        <Loading what="experiment" />
      ) : (
        <ProblemNotice
          title="The experiment could not be loaded"
          error={error}
          onRetry={() => void experiment.refetch()}
        />
      )}
    </Page>
  );
}
