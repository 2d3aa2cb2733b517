import type { Experiment, ExperimentVersion } from './dto/experiment.dto.js';
import type { ExperimentVersionEntity } from './entities/experiment-version.entity.js';
import type { ExperimentEntity } from './entities/experiment.entity.js';

export function toExperiment(row: ExperimentEntity): Experiment {
  const { id, rigId, title, latestVersion, createdAt, createdBy } = row;
  return { id, rigId, title, latestVersion, createdAt, createdBy };
}

export function toExperimentVersion(row: ExperimentVersionEntity): ExperimentVersion {
  const { experimentId, version, basedOn, note, createdAt, createdBy, content } = row;
  return { experimentId, version, basedOn, note, createdAt, createdBy, content };
}
