import { Injectable } from '@nestjs/common';
import {
  DomainError,
  preflight,
  type EnvelopeInForce,
  type ExperimentContent,
  type FieldFault,
  type ObjectiveContent,
  type PreflightFault,
} from '@cresthold/shared';
import { DataSource } from 'typeorm';
import { CalibrationStore } from '../calibrations/calibration-store.js';
import { dueStateOf } from '../calibrations/due-state.js';
import { EnvelopeStore } from '../envelopes/envelope-store.js';
import { ExperimentVersionEntity } from '../experiments/entities/experiment-version.entity.js';
import { ExperimentEntity } from '../experiments/entities/experiment.entity.js';
import { ObjectiveEntity } from '../objectives/entities/objective.entity.js';
import { RigStore } from '../rigs/rig-store.js';
import type { RunStart } from './dto/run.dto.js';

/** Everything that a run is made of, read once and judged. */
export interface PreparedRun {
  rigId: string;
  experiment: { id: string; version: number; content: ExperimentContent };
  objective: ObjectiveContent | null;
  envelope: EnvelopeInForce;
  warnings: PreflightFault[];
}

/** Gathers the documents of a run and judges them as they are now. */
@Injectable()
export class RunOrders {
  constructor(
    private readonly dataSource: DataSource,
    private readonly rigs: RigStore,
    private readonly envelopes: EnvelopeStore,
    private readonly calibrations: CalibrationStore,
  ) {}

  /** @throws experiment.not-found, objective.not-found, envelope.none-in-force, experiment.preflight-failed */
  async prepare({ experimentId, version }: RunStart): Promise<PreparedRun> {
    const experiment = await this.experiment(experimentId, version);
    const { content: rig } = await this.rigs.get(experiment.rigId);
    const objective = await this.objective(experiment.content.objectiveId);
    const envelope = await this.envelopes.inForce(rig.id);
    if (!envelope) throw new DomainError('envelope.none-in-force');
    const { graph } = experiment.content;
    const faults = preflight({ graph, objective, rig, envelope: envelope.content });
    const errors = faults.filter((fault) => fault.severity === 'error');
    if (errors.length > 0) {
      throw new DomainError('experiment.preflight-failed', undefined, errors.map(toFieldFault));
    }
    return {
      rigId: rig.id,
      experiment,
      objective,
      envelope,
      warnings: [...faults, ...(await this.overdue(rig.id))],
    };
  }

  /** A run may start on overdue calibrations; its record says so. */
  private async overdue(rigId: string): Promise<PreflightFault[]> {
    const calibrations = await this.calibrations.inForce(rigId);
    return calibrations
      .filter(({ dueOn }) => dueStateOf(dueOn, Date.now()) === 'overdue')
      .map(({ channel, dueOn }) => ({
        severity: 'warning',
        code: 'preflight.calibration-overdue',
        step: null,
        field: `calibrations.${channel}`,
        message: `The calibration of "${channel}" was due on ${dueOn}: have it calibrated.`,
      }));
  }

  private async experiment(experimentId: string, wanted: number | undefined) {
    const experiments = this.dataSource.getRepository(ExperimentEntity);
    const experiment = await experiments.findOneBy({ id: experimentId });
    if (!experiment) throw new DomainError('experiment.not-found');
    const version = wanted ?? experiment.latestVersion;
    const versions = this.dataSource.getRepository(ExperimentVersionEntity);
    const row = await versions.findOneBy({ experimentId, version });
    if (!row) throw new DomainError('experiment.not-found', `The experiment has no version ${version}.`);
    return { id: experimentId, rigId: experiment.rigId, version, content: row.content };
  }

  private async objective(objectiveId: string | null): Promise<ObjectiveContent | null> {
    if (objectiveId === null) return null;
    const objective = await this.dataSource.getRepository(ObjectiveEntity).findOneBy({ id: objectiveId });
    if (!objective) throw new DomainError('objective.not-found');
    return objective.content;
  }
}

function toFieldFault({ step, field, message }: PreflightFault): FieldFault {
  const path = step === null ? ['graph', field] : ['steps', step, field];
  return { field: path.filter((part) => part !== null).join('.'), message };
}
