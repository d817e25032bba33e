/**
 * Air that fills the displacement once per cycle at a reference density: `ρ·(V_d/1000)·(N/n_R)·60`.
 * @param densityKgM3 at the station meant (inlet or manifold), kg/m³: of moist air for a flow as metered, of the dry part for a dry flow
 * @param displacementL L @param speedRpm rev/min @param nR revolutions per cycle
 * @returns kg/h
 */
export function theoreticalAirFlowKgH(
	densityKgM3: number,
	displacementL: number,
	speedRpm: number,
	nR: 1 | 2
): number {
	return densityKgM3 * (displacementL / 1000) * (speedRpm / nR) * 60;
}

/**
 * Volumetric efficiency (two-stroke: delivery ratio): air flow over theoretical air flow.
 * @param airFlowKgH kg/h, moist or dry as the density is @param densityKgM3 see `theoreticalAirFlowKgH`
 * @param displacementL L @param speedRpm rev/min @param nR revolutions per cycle
 * @returns a fraction; NaN at standstill. Delivered air, not trapped: overlap and scavenging losses are inside it.
 */
export function volumetricEfficiency(
	airFlowKgH: number,
	densityKgM3: number,
	displacementL: number,
	speedRpm: number,
	nR: 1 | 2
): number {
	const theoretical = theoreticalAirFlowKgH(densityKgM3, displacementL, speedRpm, nR);
	return theoretical > 0 ? airFlowKgH / theoretical : NaN;
}
