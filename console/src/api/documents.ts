import type {
  EnvelopeContent,
  EnvelopeStatus,
  ExperimentContent,
  ObjectiveContent,
  PreflightFault,
  Rig,
  RigStatus,
  Role,
  RunStatus,
  Verdict,
} from '@cresthold/shared';

/** Documents as the API answers them; docs/api.md is the agreement, the generated schema the check. */
export interface Page<Item> {
  items: Item[];
  nextCursor: string | null;
}

export interface Session {
  account: string;
  title: string;
  roles: Role[];
}

export interface User extends Session {
  isEnabled: boolean;
}

export interface RigDocument {
  id: string;
  revision: number;
  content: Rig;
  status: RigStatus | null;
}

export interface EnvelopeDocument {
  id: string;
  rigId: string;
  version: number;
  status: EnvelopeStatus;
  revision: number;
  author: string;
  submittedBy: string | null;
  decidedBy: string | null;
  reason: string | null;
  createdAt: string;
  decidedAt: string | null;
  content: EnvelopeContent;
}

export interface ObjectiveDocument {
  id: string;
  rigId: string;
  revision: number;
  content: ObjectiveContent;
}

export interface RunSummary {
  id: string;
  rigId: string;
  experimentId: string;
  experimentVersion: number;
  experimentTitle: string;
  status: RunStatus;
  verdict: Verdict | null;
  reason: string | null;
  startedAt: string;
  endedAt: string | null;
  startedBy: string;
  envelopeVersion: number;
  scans: number;
  /** Results of the steps by name, e.g. `survey.best.airTrim`. */
  results: Record<string, number>;
  /** What preflight warned of when it was started. */
  warnings: PreflightFault[];
  fileSha256: string | null;
}

export interface ExperimentSummary {
  id: string;
  rigId: string;
  title: string;
  latestVersion: number;
  createdAt: string;
  createdBy: string;
}

export interface ExperimentVersion {
  experimentId: string;
  version: number;
  basedOn: number | null;
  note: string;
  createdAt: string;
  createdBy: string;
  content: ExperimentContent;
}
