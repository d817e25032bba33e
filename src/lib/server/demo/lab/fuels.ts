/** Fuels of the lab with their components by volume, and the batches in its tanks with what their certificates say. */
export const DEMO_FUELS = [
	{
		code: 'PETROL-E5',
		name: 'Petrol with 5 % ethanol',
		components: [
			{ name: 'hydrocarbon base', volumeFraction: 0.952 },
			{ name: 'ethanol', volumeFraction: 0.048 }
		]
	},
	{
		code: 'PETROL-E10',
		name: 'Petrol with 10 % ethanol',
		components: [
			{ name: 'hydrocarbon base', volumeFraction: 0.903 },
			{ name: 'ethanol', volumeFraction: 0.097 }
		]
	},
	{
		code: 'E85',
		name: 'Ethanol fuel E85',
		components: [
			{ name: 'hydrocarbon base', volumeFraction: 0.165 },
			{ name: 'ethanol', volumeFraction: 0.835 }
		]
	},
	{
		code: 'DIESEL-B7',
		name: 'Diesel with 7 % ester',
		components: [
			{ name: 'mineral diesel', volumeFraction: 0.934 },
			{ name: 'fatty acid methyl ester', volumeFraction: 0.066 }
		]
	},
	{
		code: 'SYN-98',
		name: 'Synthetic petrol blend',
		components: [
			{ name: 'alkylate', volumeFraction: 0.56 },
			{ name: 'aromatics from methanol', volumeFraction: 0.27 },
			{ name: 'ethyl tert-butyl ether', volumeFraction: 0.17 }
		]
	}
] as const;

const bomb = 'bomb calorimeter, net by hydrogen content';
const combustionAnalysis = 'combustion analysis';
const tube = 'oscillating tube, 15 °C';

export interface DemoBatch {
	client?: string;
	fuel: string;
	code: string;
	lhvMjKg: { value: number; u: number; method: string };
	densityKgM3: { value: number; u: number; method: string };
	hydrogenCarbonRatio: { value: number; u: number; method: string };
	oxygenCarbonRatio: { value: number; u: number; method: string };
	ron?: { value: number; u: number; method: string };
	oxygenMassPct?: { value: number; u: number; method: string };
}

function batch(
	head: { client?: string; fuel: string; code: string },
	[lhv, density, hydrogenCarbon, oxygenCarbon, ron]: [number, number, number, number, number?]
): DemoBatch {
	return {
		...head,
		lhvMjKg: { value: lhv, u: 0.06, method: bomb },
		densityKgM3: { value: density, u: 0.3, method: tube },
		hydrogenCarbonRatio: { value: hydrogenCarbon, u: 0.01, method: combustionAnalysis },
		oxygenCarbonRatio: { value: oxygenCarbon, u: 0.001, method: combustionAnalysis },
		...(ron === undefined ? {} : { ron: { value: ron, u: 0.3, method: 'test engine' } })
	};
}

/** How well a batch burns against what is usual, where it differs: the certificate does not say it. */
export const BURNS: Readonly<Record<string, number>> = { 'B7-219': 0.985 };

/** In the order of delivery. B7-219 came with far more ester than 7 %: light in energy, heavy, and slow to burn. */
export const DEMO_BATCHES: readonly DemoBatch[] = [
	batch({ fuel: 'PETROL-E5', code: 'E5-104' }, [42.38, 745.8, 1.88, 0.0168, 95.4]),
	batch({ fuel: 'DIESEL-B7', code: 'B7-201' }, [42.71, 834.1, 1.86, 0.006]),
	batch({ fuel: 'E85', code: 'E85-027' }, [29.2, 783.4, 2.71, 0.386, 107.3]),
	{
		...batch({ client: 'TSL', fuel: 'SYN-98', code: 'TSL-S98-04' }, [42.05, 749.1, 1.96, 0.0258, 98.1]),
		oxygenMassPct: { value: 2.86, u: 0.05, method: 'gas chromatography' }
	},
	batch({ fuel: 'DIESEL-B7', code: 'B7-219' }, [41.24, 851.3, 1.85, 0.0254]),
	batch({ fuel: 'PETROL-E5', code: 'E5-117' }, [42.41, 746.2, 1.88, 0.0165, 95.6]),
	batch({ fuel: 'PETROL-E10', code: 'E10-042' }, [41.52, 749.8, 1.92, 0.0338, 96.3]),
	batch({ fuel: 'E85', code: 'E85-031' }, [29.14, 783.9, 2.71, 0.388, 107.5]),
	batch({ fuel: 'DIESEL-B7', code: 'B7-208' }, [42.68, 834.6, 1.86, 0.0062]),
	{
		...batch({ client: 'TSL', fuel: 'SYN-98', code: 'TSL-S98-06' }, [42.17, 748.4, 1.97, 0.0242, 98.4]),
		oxygenMassPct: { value: 2.69, u: 0.05, method: 'gas chromatography' }
	}
];
