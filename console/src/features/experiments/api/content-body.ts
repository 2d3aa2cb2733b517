import type { ExperimentContent } from '@cresthold/shared';
import type { ExperimentBody } from '../../../api/index.js';

/**
 * An experiment as requests carry it. The API's description spells out the parameters of each law, which the document
 * of the core keeps as one table: the same form, of which TypeScript cannot know it.
 */
export function contentBody(content: ExperimentContent): ExperimentBody {
  return content as ExperimentBody;
}
