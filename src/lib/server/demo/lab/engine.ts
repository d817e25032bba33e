import type { Induction } from '$lib/domain/model';
import type { LineOverSpeed, ModelEngine } from '../engine-model';

interface DemoBuild {
	number: string;
	title: string;
	parent?: string;
	parts: { name: string; value: string }[];
	state: 'in_preparation' | 'ready' | 'retired';
	/** What this build changes in the model against the engine. */
	model?: Partial<ModelEngine>;
}

export interface DemoEngine {
	client: string;
	code: string;
	name: string;
	cylinders: number;
	boreMm: number;
	inertiaKgM2: number;
	induction: Induction;
	expectedTorque: LineOverSpeed;
	model: ModelEngine;
	builds: DemoBuild[];
}

/** Of the demo lab's petrol four-strokes. */
export const fourStrokeFriction = {
	constantKpa: 38,
	perPeakPressure: 0.005,
	perPistonSpeed: 7.5,
	perPistonSpeedSquared: 0.12
};
