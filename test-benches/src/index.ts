export { demoScenario } from './demo/demo-scenario.js';
export { burnerSeeking } from './demo/burner-experiment.js';
