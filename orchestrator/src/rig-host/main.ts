import { RigHost } from './rig-host.js';

/**
 * The program that the server forks for each rig. It owns the wire, the loop, the interlocks, the guard
 * and the recorder, and brings its rig to rest when the server is gone.
 */
if (process.send === undefined) {
  console.error('The rig host is started by the server: it needs a channel to it.');
  process.exit(64);
}

/** Arguments: the id of the rig, for whoever lists processes, then the plug-ins that the server was configured with. */
const [, , , ...plugIns] = process.argv;
const host = new RigHost(process, plugIns, (code) => process.exit(code));

// What is printed may have nowhere to go once the server is gone: no reason to leave a rig.
process.stdout.on('error', () => undefined);
process.stderr.on('error', () => undefined);
process.on('uncaughtException', (error) => host.onBug(error));
process.on('unhandledRejection', (reason) => host.onBug(reason));
process.on('SIGTERM', () => void host.shutDown('The rig host was asked to end.'));
// A terminal sends the interrupt to the whole group; the server orders the stop then.
process.on('SIGINT', () => undefined);
process.on('SIGHUP', () => undefined);

void host.announce();
