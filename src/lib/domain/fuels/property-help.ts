import type { FuelPropertyName } from '../model';

interface Help {
	/** Bounds that catch a wrong unit (42700 for 42.7), not an unusual fuel. */
	low: number;
	high: number;
	hint: string;
}

/** What helps to enter each property of a fuel. */
export const PROPERTY_HELP: Readonly<Record<FuelPropertyName, Help>> = {
	lhvMjKg: {
		low: 1,
		high: 142,
		hint: 'The lower one, with the water as vapour. Petrol lies near 43, ethanol near 27 MJ/kg.'
	},
	densityKgM3: {
		low: 0.05,
		high: 2000,
		hint: 'At 15 °C. Liquid fuels mostly lie between 680 and 1 000 kg/m³.'
	},
	afrStoich: {
		low: 0.5,
		high: 40,
		hint: 'Dry air per fuel by mass, for complete combustion. Left out, it is computed from H/C and O/C.'
	},
	hydrogenCarbonRatio: {
		low: 0,
		high: 10,
		hint: 'Atoms of hydrogen per atom of carbon; near 1.85 for petrol.'
	},
	oxygenCarbonRatio: {
		low: 0,
		high: 4,
		hint: 'Atoms of oxygen per atom of carbon: 0 for a hydrocarbon, 0.5 for ethanol.'
	},
	oxygenMassPct: { low: 0, high: 90, hint: 'Share of oxygen in the mass of the fuel.' },
	ron: { low: 0, high: 150, hint: 'Of fuels for spark ignition.' },
	expansionPerK: {
		low: 0,
		high: 0.01,
		hint: 'Per kelvin near 15 °C; around 0.001 for liquids. Left out, it is taken from the density.'
	}
};
