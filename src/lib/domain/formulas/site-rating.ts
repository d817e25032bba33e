export interface SiteConditions {
	/** Total barometric pressure, kPa. */
	pressureKpa: number;
	temperatureK: number;
	/** Relative humidity as a fraction, and the saturation pressure it refers to, kPa. */
	humidity: number;
	saturationKpa: number;
	/** Charge-air coolant, K. */
	coolantK: number;
}

/** Exponents of ISO 3046-1 for the kind of engine: humidity share a, pressure m, temperature n, charge coolant s. */
export interface SiteExponents {
	a: number;
	m: number;
	n: number;
	s: number;
}

/**
 * Power adjustment of ISO 3046-1 from reference to site conditions:
 * `k = ((p_x − a·φ_x·p_sx)/(p_r − a·φ_r·p_sr))^m·(T_r/T_x)^n·(T_cr/T_cx)^s`, `α = k − 0.7·(1 − k)·(1/η_m − 1)`, `β = k/α`.
 * @param mechanicalEfficiency η_m, a fraction, above 0
 * @returns k, α (site power = α × reference power) and β (site BSFC = β × reference BSFC). The coefficient 0.7 and the exponents are
 * the standard's; read in a textbook's use of it.
 */
export function siteRating(
	site: SiteConditions,
	reference: SiteConditions,
	exponents: SiteExponents,
	mechanicalEfficiency: number
): { k: number; alpha: number; beta: number } {
	const dry = (at: SiteConditions) => at.pressureKpa - exponents.a * at.humidity * at.saturationKpa;
	const k =
		(dry(site) / dry(reference)) ** exponents.m *
		(reference.temperatureK / site.temperatureK) ** exponents.n *
		(reference.coolantK / site.coolantK) ** exponents.s;
	const alpha = k - 0.7 * (1 - k) * (1 / mechanicalEfficiency - 1);
	return { k, alpha, beta: k / alpha };
}
