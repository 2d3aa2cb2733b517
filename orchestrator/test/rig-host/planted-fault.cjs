// Loaded into the rig host by a test: an exception that nothing catches, on request.
process.on('SIGUSR2', () => {
  setImmediate(() => {
    throw new Error('planted by a test');
  });
});
