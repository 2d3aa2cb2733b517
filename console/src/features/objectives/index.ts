export { objectiveKeys, objectivesQuery, useObjectives, useRigObjectives } from './api/objectives.js';
