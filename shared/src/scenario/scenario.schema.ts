import { z } from 'zod';
import { envelopeContentSchema } from '../envelopes/envelope.schema.js';
import { experimentContentSchema } from '../experiments/experiment.schema.js';
import { objectiveContentSchema } from '../objectives/objective.schema.js';
import { roleSchema } from '../people/role.js';
import { slugSchema, titleSchema } from '../rigs/channel-id.js';
import { rigSchema } from '../rigs/rig.schema.js';

/** Name of an account as the API knows it. */
const accountSchema = z.string().trim().min(1).max(120);
const reasonSchema = z.string().trim().min(1).max(500);

/** A person of a scenario; the loader makes a password per installation, so none stands here. */
export const scenarioUserSchema = z.object({
  account: accountSchema,
  title: titleSchema,
  roles: z.array(roleSchema).min(1),
});

/** An envelope as it came into force: written by one, approved by another. */
export const scenarioEnvelopeSchema = z.object({
  content: envelopeContentSchema,
  author: accountSchema,
  approvedBy: accountSchema,
  reason: reasonSchema,
});

export const scenarioObjectiveSchema = z.object({
  /** Name of the objective within this file. */
  key: slugSchema,
  content: objectiveContentSchema,
  author: accountSchema,
});

export const scenarioExperimentSchema = z.object({
  /** Name of the experiment within this file. */
  key: slugSchema,
  /** Objective that it uses, by its key; null where no step needs one. */
  objectiveKey: slugSchema.nullable(),
  /** `objectiveId` is null here: the loader sets the id of the objective that it has made. */
  content: experimentContentSchema,
  author: accountSchema,
  note: z.string().max(500).default(''),
});

export const scenarioRigSchema = z.object({
  rig: rigSchema,
  envelope: scenarioEnvelopeSchema,
  objectives: z.array(scenarioObjectiveSchema),
  experiments: z.array(scenarioExperimentSchema),
});

const scenarioBase = z.object({
  users: z.array(scenarioUserSchema).min(1),
  rigs: z.array(scenarioRigSchema).min(1),
  /** The run that a demonstration starts, and who starts it. */
  start: z.object({ rigId: slugSchema, experimentKey: slugSchema, by: accountSchema }).nullable(),
});

/** A set of people, rigs and documents to begin an installation with, as one file. */
export const scenarioSchema = scenarioBase.superRefine((scenario, context) => {
  const fault = (path: (string | number)[], message: string) =>
    context.addIssue({ code: 'custom', path, message });
  const accounts = new Set(scenario.users.map((user) => user.account));
  const known = (account: string, path: (string | number)[]) => {
    if (!accounts.has(account)) fault(path, `The scenario has no user "${account}": add it to "users".`);
  };
  if (accounts.size < scenario.users.length) fault(['users'], 'An account is listed twice: keep one.');
  scenario.rigs.forEach(({ envelope, objectives, experiments }, index) => {
    const at = (...path: (string | number)[]) => ['rigs', index, ...path];
    known(envelope.author, at('envelope', 'author'));
    known(envelope.approvedBy, at('envelope', 'approvedBy'));
    if (envelope.author === envelope.approvedBy) {
      fault(at('envelope', 'approvedBy'), 'The author of an envelope cannot approve it: name somebody else.');
    }
    const keys = new Set(objectives.map((objective) => objective.key));
    if (keys.size < objectives.length) fault(at('objectives'), 'An objective key is used twice.');
    objectives.forEach((objective, n) => known(objective.author, at('objectives', n, 'author')));
    experiments.forEach((experiment, n) => {
      known(experiment.author, at('experiments', n, 'author'));
      if (experiment.objectiveKey !== null && !keys.has(experiment.objectiveKey)) {
        fault(at('experiments', n, 'objectiveKey'), `The rig has no objective "${experiment.objectiveKey}".`);
      }
    });
  });
  checkStart(scenario, known, fault);
});

function checkStart(
  scenario: z.infer<typeof scenarioBase>,
  known: (account: string, path: (string | number)[]) => void,
  fault: (path: (string | number)[], message: string) => void,
): void {
  if (scenario.start === null) return;
  const { rigId, experimentKey, by } = scenario.start;
  known(by, ['start', 'by']);
  const rig = scenario.rigs.find((candidate) => candidate.rig.id === rigId);
  if (!rig) fault(['start', 'rigId'], `The scenario has no rig "${rigId}".`);
  else if (!rig.experiments.some((experiment) => experiment.key === experimentKey)) {
    fault(['start', 'experimentKey'], `Rig "${rigId}" has no experiment "${experimentKey}".`);
  }
}

export type Scenario = z.infer<typeof scenarioSchema>;
export type ScenarioInput = z.input<typeof scenarioSchema>;
