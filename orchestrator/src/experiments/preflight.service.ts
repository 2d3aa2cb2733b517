import { Injectable } from '@nestjs/common';
import {
  preflight,
  type ExperimentContent,
  type ObjectiveContent,
  type PreflightFault,
} from '@cresthold/shared';
import { EnvelopeStore } from '../envelopes/envelope-store.js';
import { ObjectiveStore } from '../objectives/objective-store.js';
import { RigStore } from '../rigs/rig-store.js';

/** Runs preflight on an experiment with the rig, objective and envelope that hold now. */
@Injectable()
export class PreflightService {
  constructor(
    private readonly rigs: RigStore,
    private readonly envelopes: EnvelopeStore,
    private readonly objectives: ObjectiveStore,
  ) {}

  /** @throws rig.not-found */
  async check(rigId: string, content: ExperimentContent): Promise<PreflightFault[]> {
    const rig = await this.rigs.get(rigId);
    const inForce = await this.envelopes.inForce(rigId);
    const { objective, faults } = await this.objectiveOf(rigId, content);
    const found = preflight({
      rig: rig.content,
      envelope: inForce?.content ?? null,
      objective,
      graph: content.graph,
    });
    return [...faults, ...found];
  }

  private async objectiveOf(
    rigId: string,
    { objectiveId }: ExperimentContent,
  ): Promise<{ objective: ObjectiveContent | null; faults: PreflightFault[] }> {
    if (objectiveId === null) return { objective: null, faults: [] };
    const row = await this.objectives.find(objectiveId);
    if (row?.rigId === rigId) return { objective: row.content, faults: [] };
    const unknown: PreflightFault = {
      severity: 'error',
      code: 'preflight.unknown-objective',
      step: null,
      field: 'objectiveId',
      message: 'The rig has no such objective: choose one of its own.',
    };
    return { objective: null, faults: [unknown] };
  }
}
