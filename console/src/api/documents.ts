import type { components } from './schema.js';

/** Documents as the API answers them: taken from its description, so that they cannot drift from the server. */
type Schemas = components['schemas'];

export interface Page<Item> {
  items: Item[];
  nextCursor: string | null;
}

export type Session = Schemas['Session'];
export type SignedInPlace = Schemas['SignedInPlace'];
export type SecondFactor = Schemas['SecondFactor'];
export type User = Schemas['User'];
export type RigDocument = Schemas['RigDocument'];
export type EnvelopeDocument = Schemas['Envelope'];
export type EnvelopeReplay = Schemas['EnvelopeReplay'];
export type ProofTest = Schemas['ProofTest'];
export type ProofTestDue = Schemas['ProofTestDue'];
export type ObjectiveDocument = Schemas['Objective'];
export type ExperimentSummary = Schemas['Experiment'];
export type ExperimentVersion = Schemas['ExperimentVersion'];
export type RunSummary = Schemas['Run'];
export type AdapterDocument = Schemas['Adapter'];
export type SerialPort = Schemas['SerialPort'];
export type ScanBudget = Schemas['ScanBudget'];
export type Lockout = Schemas['Lockout'];
export type TripSummary = Schemas['TripSummary'];
export type TripDocument = Schemas['TripDocument'];
export type CalibrationDocument = Schemas['Calibration'];
/** A rig as requests carry it. */
export type RigBody = Schemas['RigInput'];
/** An experiment as requests carry it. */
export type ExperimentBody = Schemas['ExperimentContentInput'];
