export { answerOf, client, ifMatch } from './client.js';
export type {
  AdapterDocument,
  CalibrationDocument,
  EnvelopeDocument,
  ExperimentBody,
  ExperimentSummary,
  ExperimentVersion,
  ObjectiveDocument,
  Page,
  RigBody,
  RigDocument,
  RunSummary,
  ScanBudget,
  SerialPort,
  Session,
  User,
} from './documents.js';
export { ApiProblem, asProblem, networkProblem } from './problem.js';
export { createQueryClient, sessionKey } from './query-client.js';
