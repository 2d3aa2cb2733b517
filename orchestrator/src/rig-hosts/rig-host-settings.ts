import { fileURLToPath } from 'node:url';
import {
  defaultRestartPolicy,
  defaultTiming,
  type RestartPolicy,
  type SupervisionTiming,
} from './supervision/supervision-options.js';

/** Injection token of the `RigHostSettings`. */
export const RIG_HOST_SETTINGS = Symbol('rig-host-settings');

export interface RigHostSettings {
  /** Path of the program that is forked. */
  program: string;
  timing: SupervisionTiming;
  restartPolicy: RestartPolicy;
  /** How long to wait for the host of an earlier server to end, ms: it may still be ramping its rig to rest. */
  orphanWaitMs: number;
}

export const defaultRigHostSettings: RigHostSettings = {
  program: fileURLToPath(new URL('../rig-host/main.js', import.meta.url)),
  timing: defaultTiming,
  restartPolicy: defaultRestartPolicy,
  orphanWaitMs: 60_000,
};
