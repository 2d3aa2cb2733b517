export { useExperimentVersion } from './api/experiment-queries.js';
export { GraphDrawing } from './drawing/graph-drawing.js';
