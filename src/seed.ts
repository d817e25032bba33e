import { readConfig } from './lib/server/config';
import { seedDemoLab } from './lib/server/demo';
import { closeDeps, openDeps } from './lib/server/deps';

/** Fills an empty laboratory with the demo lab; `TRUNNION_DEMO=off` leaves it empty. Ends with 1 where it should be started again. */
async function main(): Promise<void> {
	if (process.env.TRUNNION_DEMO === 'off') {
		console.log('Demo lab: switched off by TRUNNION_DEMO.');
		return;
	}
	const deps = openDeps(readConfig(process.env), 3);
	try {
		const ended = await seedDemoLab(deps, { say: (line) => console.log(line) });
		if (ended === 'waiting' || ended === 'busy') process.exitCode = 1;
	} catch (error) {
		console.error(error);
		process.exitCode = 1;
	} finally {
		await closeDeps(deps);
	}
}

await main();
