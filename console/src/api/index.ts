export { answerOf, client, ifMatch } from './client.js';
export type {
  AdapterDocument,
  EnvelopeDocument,
  ExperimentBody,
  ExperimentSummary,
  ExperimentVersion,
  ObjectiveDocument,
  Page,
  RigDocument,
  RunSummary,
  Session,
  User,
} from './documents.js';
export { ApiProblem, asProblem, networkProblem } from './problem.js';
export { createQueryClient, sessionKey } from './query-client.js';
