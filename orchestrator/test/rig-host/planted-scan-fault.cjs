// Loaded into the rig host by a test: the next scan throws, once, on request.
process.on('SIGUSR2', () => {
  const now = Date.now;
  Date.now = () => {
    Date.now = now;
    throw new Error('planted by a test');
  };
});
