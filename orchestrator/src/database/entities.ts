import { AuditEntry } from '../audit/entities/audit-entry.entity.js';
import { SecondFactorEntity } from '../auth/entities/second-factor.entity.js';
import { SessionEntity } from '../auth/entities/session.entity.js';
import { CalibrationCertificateEntity } from '../calibrations/entities/calibration-certificate.entity.js';
import { CalibrationEntity } from '../calibrations/entities/calibration.entity.js';
import { EnvelopeEntity } from '../envelopes/entities/envelope.entity.js';
import { ExperimentVersionEntity } from '../experiments/entities/experiment-version.entity.js';
import { ExperimentEntity } from '../experiments/entities/experiment.entity.js';
import { ObjectiveEntity } from '../objectives/entities/objective.entity.js';
import { ProofTestEntity } from '../proof-tests/entities/proof-test.entity.js';
import { RunEntity } from '../recordings/entities/run.entity.js';
import { RigLockoutEntity } from '../rigs/entities/rig-lockout.entity.js';
import { RigStateEntity } from '../rigs/entities/rig-state.entity.js';
import { RigEntity } from '../rigs/entities/rig.entity.js';
import { RigTripEntity } from '../trips/entities/rig-trip.entity.js';
import { UserEntity } from '../users/entities/user.entity.js';

/** Every table of the main database; a new entity is listed here and gets a migration. */
export const entities = [
  AuditEntry,
  CalibrationCertificateEntity,
  CalibrationEntity,
  EnvelopeEntity,
  ExperimentEntity,
  ExperimentVersionEntity,
  ObjectiveEntity,
  ProofTestEntity,
  RigEntity,
  RigLockoutEntity,
  RigStateEntity,
  RigTripEntity,
  RunEntity,
  SecondFactorEntity,
  SessionEntity,
  UserEntity,
];
