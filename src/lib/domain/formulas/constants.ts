/** Molar masses, g/mol, and dry air of 40 CFR 1065.1005(f). */
export const MOLAR_MASS = {
	carbon: 12.0107,
	hydrogen: 1.00794,
	oxygen: 15.9994,
	nitrogen: 14.0067,
	sulfur: 32.065,
	water: 18.01528,
	dryAir: 28.96559
} as const;

/** Mole fraction of oxygen in dry air, 40 CFR 1065.1005(f). */
export const OXYGEN_IN_DRY_AIR = 0.209445;

/** Specific gas constants of dry air and of water vapour, J/(kg·K). */
export const R_DRY = 287.05;
export const R_VAPOUR = 461.5;

/** 0 °C, K. */
const ZERO_CELSIUS_K = 273.15;

export const kelvin = (celsius: number) => celsius + ZERO_CELSIUS_K;
