import { parentPort } from 'node:worker_threads';
import type { FromRecorder, ToRecorder } from './recorder-messages.js';
import { RecorderQueue } from './recorder-queue.js';

/** The recorder thread: works off one message after the other, so that transactions never overlap. */
const port = parentPort;
if (port === null) throw new Error('recorder-worker runs in a worker thread of the rig host only.');

const queue = new RecorderQueue((message, transfer) => port.postMessage(message, transfer ?? []));
let chain: Promise<void> = Promise.resolve();

port.postMessage({ type: 'ready' } satisfies FromRecorder);
port.on('message', (message: ToRecorder) => {
  chain = chain.then(() => queue.take(message));
  if (message.type === 'close') chain = chain.then(() => port.close());
});
