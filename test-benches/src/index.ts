export { demoScenario } from './demo/demo-scenario.js';
export { burnerSeeking } from './burner/scenario/burner-experiment.js';
