import type { ModelEngine } from '../engine-model';
import type { DemoEngine } from './engine';
import { sprint, ultralight } from './natural-engines';
import { farm, generator, research } from './turbo-engines';

export const DEMO_ENGINES: readonly DemoEngine[] = [sprint, generator, ultralight, farm, research];

/** The model of a build: its engine with what the build changes. */
export function modelOf(engine: DemoEngine, buildNumber: string): ModelEngine {
	const build = engine.builds.find(({ number }) => number === buildNumber);
	if (!build) throw new Error(`engine ${engine.code} has no build ${buildNumber}`);
	return { ...engine.model, ...build.model };
}
