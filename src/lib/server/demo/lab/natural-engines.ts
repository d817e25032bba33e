import { fourStrokeFriction, type DemoEngine } from './engine';

export const sprint: DemoEngine = {
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
			state: 'in_preparation',
			model: { compressionRatio: 12.4 }
		}
	]
};

export const ultralight: DemoEngine = {
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
			state: 'ready',
			model: {
				breathing: { best: 0.66, atRpm: 5500, fall: 0.3, tuned: [{ atRpm: 5450, widthRpm: 950, gain: 0.1 }] }
			}
		},
		{
			number: 'LH-58.3',
			title: 'Longer header, leaner mid-range needles',
			parent: 'LH-58.2',
			parts: [
				{ name: 'Exhaust', value: 'E-14, header 365 mm' },
				{ name: 'Carburettors', value: '2 × 36 mm, needles one notch leaner' },
				{ name: 'Propeller side', value: 'bare crankshaft' }
			],
			state: 'in_preparation'
		}
	]
};
