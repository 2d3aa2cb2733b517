export { CalibrationPanel } from './calibration-panel.js';
export { CalibrationSummary } from './calibration-summary.js';
