// Loaded into the server of the demo before its own program: where the demo is gone, even by force, the
// server ends in order. Rig hosts inherit the option but are no children of the demo, so it passes them by.
if (process.ppid === Number(process.env.CRESTHOLD_DEMO_PID)) {
  process.once('disconnect', () => process.kill(process.pid, 'SIGTERM'));
}
