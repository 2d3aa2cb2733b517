import { Initial1796083200000 } from './1796083200000-initial.js';
import { Runs1796083300000 } from './1796083300000-runs.js';
import { Calibrations1796083400000 } from './1796083400000-calibrations.js';
import { AuditChain1796083500000 } from './1796083500000-audit-chain.js';
import { People1796083550000 } from './1796083550000-people.js';
import { ProofTests1796083590000 } from './1796083590000-proof-tests.js';
import { TripsAndLockouts1796083600000 } from './1796083600000-trips-and-lockouts.js';

/** Every migration, oldest first; a released one is never changed. */
export const migrations = [
  Initial1796083200000,
  Runs1796083300000,
  Calibrations1796083400000,
  AuditChain1796083500000,
  People1796083550000,
  ProofTests1796083590000,
  TripsAndLockouts1796083600000,
];
