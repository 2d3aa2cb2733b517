/** Every wait of the supervisor is bounded by one of these. */
export interface SupervisionTiming {
  /** From fork to READY. */
  readyMs: number;
  /** From a command to its reply. */
  requestMs: number;
  /** From `configure` to its reply: time to open every wire. */
  configureMs: number;
  /** Longest time without a valid message of a host that is READY; longer is taken as hung. */
  silenceMs: number;
  /** From `shut-down` to the end of the process: time to ramp the rig to rest. */
  shutDownMs: number;
  /** Between two signs of life to the host. */
  aliveEveryMs: number;
  /** Messages per second above which the host is taken as out of its mind. */
  messagesPerSMax: number;
}

/** How often and how fast a host that died after READY is begun again. */
export interface RestartPolicy {
  /** Restarts allowed within the window. */
  restartsMax: number;
  windowMs: number;
  /** Delay before the first restart; doubles with each restart in the window. */
  firstDelayMs: number;
  delayMaxMs: number;
}

export const defaultTiming: SupervisionTiming = {
  readyMs: 30_000,
  requestMs: 5_000,
  configureMs: 20_000,
  silenceMs: 4_000,
  shutDownMs: 50_000,
  aliveEveryMs: 500,
  messagesPerSMax: 2_000,
};

export const defaultRestartPolicy: RestartPolicy = {
  restartsMax: 5,
  windowMs: 120_000,
  firstDelayMs: 250,
  delayMaxMs: 5_000,
};
