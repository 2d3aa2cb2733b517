export { noteAttendance } from './attendance.js';
export { answerOf, client, ifMatch } from './client.js';
export type {
  AdapterDocument,
  CalibrationDocument,
  EnvelopeDocument,
  ExperimentBody,
  ExperimentSummary,
  ExperimentVersion,
  Lockout,
  EnvelopeReplay,
  ObjectiveDocument,
  ProofTest,
  ProofTestDue,
  Page,
  RigBody,
  RigDocument,
  RunSummary,
  ScanBudget,
  SerialPort,
  SecondFactor,
  Session,
  SignedInPlace,
  User,
  TripDocument,
  TripSummary,
} from './documents.js';
export { ApiProblem, asProblem, networkProblem } from './problem.js';
export { askForPasswordWith } from './reauthentication.js';
export { createQueryClient, sessionKey } from './query-client.js';
