import { log, readConfig } from './lib/server/config';
import { closeDeps, openDeps } from './lib/server/deps';
import { startWorker } from './lib/server/worker';

const deps = openDeps(readConfig(process.env), 4);
const worker = await startWorker(deps);
log.info('worker started');

let stopping = false;
async function stop(): Promise<void> {
	if (stopping) return;
	stopping = true;
	await worker.stop();
	await closeDeps(deps);
	log.info('worker stopped');
}
process.once('SIGTERM', () => void stop());
process.once('SIGINT', () => void stop());

await worker.ended;
if (!stopping) {
	log.error('the worker ended by itself');
	process.exitCode = 1;
	await closeDeps(deps);
}
