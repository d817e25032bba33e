import { batchAfrStoich, fuelDisagreements } from '../formulas/fuel';
import { channelOf } from '../channels/catalogue';
import type { Finding, RunContext } from '../model';
import { knownSources } from '../trace/atmosphere';
import { columnsOf, type Trace } from '../trace/trace';

/** What the run's ambient, fuel and settings leave open, each said once. */
export function contextFindings(trace: Trace, context: RunContext): Finding[] {
	const { ambient, correction, fuel } = context;
	const findings: Finding[] = [];
	const say = (severity: Finding['severity'], code: string, message: string, channel?: string) =>
		findings.push({ code, severity, message, spans: [], channel });
	const has = (code: string) => columnsOf(trace, code).length > 0;
	const columns = new Map(
		trace.columns.filter((column) => channelOf(column.code)).map((column) => [column.code, column.values])
	);
	const known = knownSources(columns, ambient);
	const missing = [
		known.barometer ? null : 'barometer',
		known.temperature ? null : 'air temperature',
		known.humidity ? null : 'humidity'
	].filter((name) => name !== null);
	if (correction !== 'none' && missing.length > 0)
		say(
			'warning',
			'ambient_missing',
			`The correction needs the ${missing.join(', ')}; enter it for the run or record a channel of it.`
		);
	else if (has('air_flow') && (!known.barometer || !known.temperature))
		say(
			'info',
			'ambient_missing',
			`The volumetric efficiency at the inlet needs the ${missing.join(', ')}; it is left out.`
		);
	else if (has('air_flow') && !known.humidity)
		say(
			'info',
			'humidity_missing',
			'The humidity is not known; the density of the inlet air is that of dry air.'
		);
	if (has('air_flow'))
		say(
			'info',
			'air_flow_assumed_dry',
			'The map does not say whether the air flow is dry or as metered; it is taken as dry.',
			'air_flow'
		);
	if (has('air_flow_volume') && !has('air_flow'))
		say(
			'info',
			'air_volume_not_used',
			'The air flow is by volume and its reference condition is not known; no mass flow is made of it.',
			'air_flow_volume'
		);
	const fuelled = has('fuel_flow');
	if (fuelled && fuel.lhvMjKg === undefined)
		say(
			'info',
			'heating_value_missing',
			'The fuel batch states no heating value; efficiencies and energy flow are left out.'
		);
	if (fuelled && has('air_flow') && batchAfrStoich(fuel) === null)
		say(
			'info',
			'stoichiometry_missing',
			'The fuel batch states neither its stoichiometric air-fuel ratio nor its H/C; lambda by flow is left out.'
		);
	if (has('fuel_flow_volume') && !fuelled)
		say(
			'info',
			'density_missing',
			'The fuel flow is by volume and the batch states no density; no mass flow is made of it.',
			'fuel_flow_volume'
		);
	const byVolume = columnsOf(trace, 'fuel_flow').some((column) => column.index === null);
	if (byVolume && !has('fuel_temp'))
		say(
			'info',
			'fuel_temperature_assumed',
			'The fuel flow is by volume and its temperature is not recorded; the density at 15 °C is used.',
			'fuel_flow'
		);
	if (columnsOf(trace, 'fuel_flow').length > 1)
		say(
			'warning',
			'several_fuel_flows',
			'The trace has several fuel flows; the figures use the first alone, since nothing says whether they add or return.',
			'fuel_flow'
		);
	if (has('afr_sensor') && !has('lambda_sensor'))
		say(
			'info',
			'display_stoichiometry_unknown',
			'The sensor shows an air-fuel ratio; without its display’s own stoichiometric value no lambda is made of it.',
			'afr_sensor'
		);
	for (const sentence of fuelDisagreements(fuel)) say('warning', 'fuel_data_disagree', sentence);
	return findings;
}
