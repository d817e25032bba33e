import { fourStrokeFriction, type DemoEngine } from './engine';

export const generator: DemoEngine = {
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
				{ name: 'Pistons', value: 'raised crown, compression ratio 11.7' },
				{ name: 'Ignition map', value: 'G4' },
				{ name: 'Injectors', value: '420 g/min' }
			],
			state: 'ready',
			model: { compressionRatio: 11.7 }
		}
	]
};

export const farm: DemoEngine = {
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

export const research: DemoEngine = {
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
