import type { Induction } from '$lib/domain/model';
import type { LineOverSpeed, ModelEngine } from '../engine-model';

export interface DemoBuild {
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

const fourStrokeFriction = {
	constantKpa: 38,
	perPeakPressure: 0.005,
	perPistonSpeed: 7.5,
	perPistonSpeedSquared: 0.12
};

const sprint: DemoEngine = {
	client: 'QMS',
	code: 'QM-24',
	name: '2.4 L four for sprint boats',
	cylinders: 4,
	boreMm: 90,
	inertiaKgM2: 0.16,
	induction: 'natural',
	expectedTorque: [
		[2500, 205],
		[4000, 226],
		[5200, 238],
		[6500, 208],
		[7200, 178]
	],
	model: {
		displacementL: 2.4,
		strokesPerCycle: 4,
		ignition: 'spark',
		strokeMm: 94.3,
		compressionRatio: 11.5,
		maxSpeedRpm: 7200,
		breathing: { best: 0.98, atRpm: 5200, fall: 0.32, tuned: [{ atRpm: 5300, widthRpm: 1100, gain: 0.07 }] },
		inletLossKpa: 2.5,
		boost: null,
		lambda: [
			[2000, 0.95],
			[5000, 0.92],
			[7200, 0.89]
		],
		combustion: { quality: 0.79, bestRpm: 4200, lossLow: 0.2, lossHigh: 0.1 },
		trapping: null,
		friction: fourStrokeFriction,
		exhaustShare: 0.36,
		oilReliefKpa: 480
	},
	builds: [
		{
			number: 'QM-24.1',
			title: 'As delivered',
			parts: [
				{ name: 'Camshafts', value: '264° / 10.2 mm' },
				{ name: 'Intake runners', value: '310 mm' },
				{ name: 'Compression ratio', value: '11.5' }
			],
			state: 'ready'
		},
		{
			number: 'QM-24.2',
			title: 'Short runners for the top end',
			parent: 'QM-24.1',
			parts: [
				{ name: 'Camshafts', value: '264° / 10.2 mm' },
				{ name: 'Intake runners', value: '240 mm' },
				{ name: 'Compression ratio', value: '11.5' }
			],
			state: 'ready',
			model: {
				breathing: {
					best: 0.98,
					atRpm: 5500,
					fall: 0.34,
					tuned: [{ atRpm: 6200, widthRpm: 1000, gain: 0.08 }]
				}
			}
		},
		{
			number: 'QM-24.3',
			title: 'Short runners, higher compression',
			parent: 'QM-24.2',
			parts: [
				{ name: 'Camshafts', value: '264° / 10.2 mm' },
				{ name: 'Intake runners', value: '240 mm' },
				{ name: 'Compression ratio', value: '12.4' }
			],
			state: 'in_preparation'
		}
	]
};

const generator: DemoEngine = {
	client: 'BVG',
	code: 'BV-16',
	name: '1.6 L turbo four for generator sets',
	cylinders: 4,
	boreMm: 77,
	inertiaKgM2: 0.14,
	induction: 'turbo_cooled',
	expectedTorque: [
		[1400, 150],
		[2000, 215],
		[3000, 225],
		[4200, 190]
	],
	model: {
		displacementL: 1.6,
		strokesPerCycle: 4,
		ignition: 'spark',
		strokeMm: 85.9,
		compressionRatio: 10.6,
		maxSpeedRpm: 4200,
		breathing: { best: 0.93, atRpm: 2900, fall: 0.12, tuned: [] },
		inletLossKpa: 1.5,
		boost: {
			ratio: [
				[1400, 1.25],
				[2000, 1.52],
				[2600, 1.58],
				[3400, 1.58],
				[4200, 1.5]
			],
			compressorEfficiency: 0.68,
			coolerEffectiveness: 0.72
		},
		lambda: [
			[1400, 1],
			[3000, 1],
			[4200, 0.96]
		],
		combustion: { quality: 0.752, bestRpm: 2700, lossLow: 0.16, lossHigh: 0.1 },
		trapping: null,
		friction: fourStrokeFriction,
		exhaustShare: 0.345,
		oilReliefKpa: 430
	},
	builds: [
		{
			number: 'BV-16.A',
			title: 'Series pistons',
			parts: [
				{ name: 'Pistons', value: 'series, compression ratio 10.6' },
				{ name: 'Ignition map', value: 'G3' },
				{ name: 'Injectors', value: '420 g/min' }
			],
			state: 'ready'
		},
		{
			number: 'BV-16.B',
			title: 'Raised compression for E85',
			parent: 'BV-16.A',
			parts: [
				{ name: 'Pistons', value: 'raised crown, compression ratio 11.8' },
				{ name: 'Ignition map', value: 'G4' },
				{ name: 'Injectors', value: '420 g/min' }
			],
			state: 'ready',
			model: { compressionRatio: 11.8 }
		}
	]
};

const ultralight: DemoEngine = {
	client: 'LHA',
	code: 'LH-58',
	name: '0.58 L two-stroke twin for ultralights',
	cylinders: 2,
	boreMm: 76,
	inertiaKgM2: 0.021,
	induction: 'natural',
	expectedTorque: [
		[3500, 50],
		[5000, 65],
		[5900, 72],
		[6800, 62]
	],
	model: {
		displacementL: 0.58,
		strokesPerCycle: 2,
		ignition: 'spark',
		strokeMm: 64,
		compressionRatio: 9.2,
		maxSpeedRpm: 6800,
		breathing: { best: 0.66, atRpm: 5700, fall: 0.3, tuned: [{ atRpm: 5900, widthRpm: 900, gain: 0.09 }] },
		inletLossKpa: 1.2,
		boost: null,
		lambda: [
			[3000, 0.9],
			[6000, 0.88],
			[6800, 0.86]
		],
		combustion: { quality: 0.815, bestRpm: 5300, lossLow: 0.3, lossHigh: 0.3 },
		trapping: [
			[3000, 0.72],
			[5000, 0.79],
			[5900, 0.82],
			[6800, 0.79]
		],
		friction: { constantKpa: 18, perPeakPressure: 0.004, perPistonSpeed: 3.2, perPistonSpeedSquared: 0.06 },
		exhaustShare: 0.4,
		oilReliefKpa: 0
	},
	builds: [
		{
			number: 'LH-58.1',
			title: 'Certified exhaust',
			parts: [
				{ name: 'Exhaust', value: 'E-12, header 320 mm' },
				{ name: 'Carburettors', value: '2 × 36 mm' },
				{ name: 'Propeller side', value: 'bare crankshaft' }
			],
			state: 'ready'
		},
		{
			number: 'LH-58.2',
			title: 'Longer header',
			parent: 'LH-58.1',
			parts: [
				{ name: 'Exhaust', value: 'E-14, header 365 mm' },
				{ name: 'Carburettors', value: '2 × 36 mm' },
				{ name: 'Propeller side', value: 'bare crankshaft' }
			],
			state: 'in_preparation'
		}
	]
};

const farm: DemoEngine = {
	client: 'SFM',
	code: 'SD-45',
	name: '4.5 L turbo diesel for tractors',
	cylinders: 4,
	boreMm: 107,
	inertiaKgM2: 0.72,
	induction: 'turbo_cooled',
	expectedTorque: [
		[900, 430],
		[1400, 620],
		[1800, 600],
		[2300, 490]
	],
	model: {
		displacementL: 4.5,
		strokesPerCycle: 4,
		ignition: 'compression',
		strokeMm: 125,
		compressionRatio: 17.2,
		maxSpeedRpm: 2300,
		breathing: { best: 0.95, atRpm: 1500, fall: 0.1, tuned: [] },
		inletLossKpa: 2,
		boost: {
			ratio: [
				[900, 1.5],
				[1300, 2.05],
				[1800, 2.25],
				[2300, 2.3]
			],
			compressorEfficiency: 0.72,
			coolerEffectiveness: 0.75
		},
		lambda: [
			[900, 1.42],
			[1400, 1.5],
			[1800, 1.64],
			[2300, 1.88]
		],
		combustion: { quality: 0.79, bestRpm: 1500, lossLow: 0.14, lossHigh: 0.1 },
		trapping: null,
		friction: { constantKpa: 30, perPeakPressure: 0.005, perPistonSpeed: 8, perPistonSpeedSquared: 0.2 },
		exhaustShare: 0.36,
		oilReliefKpa: 420
	},
	builds: [
		{
			number: 'SD-45.1',
			title: 'Stage build, injection map 7',
			parts: [
				{ name: 'Turbocharger', value: 'T2, 58 mm compressor' },
				{ name: 'Injection map', value: '7' }
			],
			state: 'ready'
		},
		{
			number: 'SD-45.2',
			title: 'Retarded injection, map 9',
			parent: 'SD-45.1',
			parts: [
				{ name: 'Turbocharger', value: 'T2, 58 mm compressor' },
				{ name: 'Injection map', value: '9' }
			],
			state: 'ready',
			model: { combustion: { quality: 0.778, bestRpm: 1500, lossLow: 0.14, lossHigh: 0.1 } }
		}
	]
};

const research: DemoEngine = {
	client: 'TSL',
	code: 'TS-14',
	name: '1.4 L turbo triple for fuel research',
	cylinders: 3,
	boreMm: 79,
	inertiaKgM2: 0.09,
	induction: 'turbo_cooled',
	expectedTorque: [
		[1800, 150],
		[3000, 200],
		[4500, 205],
		[6500, 155]
	],
	model: {
		displacementL: 1.4,
		strokesPerCycle: 4,
		ignition: 'spark',
		strokeMm: 95.2,
		compressionRatio: 12,
		maxSpeedRpm: 6500,
		breathing: { best: 0.95, atRpm: 4200, fall: 0.14, tuned: [] },
		inletLossKpa: 2,
		boost: {
			ratio: [
				[1800, 1.35],
				[2800, 1.72],
				[4500, 1.8],
				[6500, 1.74]
			],
			compressorEfficiency: 0.7,
			coolerEffectiveness: 0.78
		},
		lambda: [
			[1800, 1],
			[4500, 1],
			[6500, 0.98]
		],
		combustion: { quality: 0.745, bestRpm: 3800, lossLow: 0.16, lossHigh: 0.09 },
		trapping: null,
		friction: fourStrokeFriction,
		exhaustShare: 0.34,
		oilReliefKpa: 450
	},
	builds: [
		{
			number: 'TS-14.1',
			title: 'Fuel research build',
			parts: [
				{ name: 'Injectors', value: 'side, 250 bar' },
				{ name: 'Fuel metering', value: 'two Coriolis meters in series' }
			],
			state: 'ready'
		}
	]
};

export const DEMO_ENGINES: readonly DemoEngine[] = [sprint, generator, ultralight, farm, research];

/** The model of a build: its engine with what the build changes. */
export function modelOf(engine: DemoEngine, buildNumber: string): ModelEngine {
	const build = engine.builds.find(({ number }) => number === buildNumber);
	if (!build) throw new Error(`engine ${engine.code} has no build ${buildNumber}`);
	return { ...engine.model, ...build.model };
}
