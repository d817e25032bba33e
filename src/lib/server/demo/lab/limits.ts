import type { z } from 'zod';
import type { NewLimitSet } from '../../limits';

/** Fuel energy flow that the fuel research engine may not pass, MJ/h over rev/min. */
export const ENERGY_FLOW_TABLE: [rpm: number, mjPerH: number][] = [
	[1800, 300],
	[3000, 610],
	[4200, 880],
	[4800, 985],
	[5400, 1045],
	[6000, 1070],
	[6500, 1075]
];

export const DEMO_LIMIT_SETS: readonly z.input<typeof NewLimitSet>[] = [
	{
		code: 'LAB-SAFE',
		title: 'Engine safety, four-stroke',
		rules: [
			{
				title: 'Coolant temperature',
				subject: { channel: 'coolant_temp' },
				relation: 'at_most',
				limit: 112,
				holdS: 2,
				severity: 'breach'
			},
			{
				title: 'Oil pressure over speed',
				subject: { channel: 'oil_pressure' },
				relation: 'at_least',
				limit: {
					over: 'speed',
					table: [
						[600, 80],
						[2000, 180],
						[6000, 300]
					]
				},
				holdS: 0.5,
				severity: 'breach'
			},
			{
				title: 'Exhaust temperature',
				subject: { channel: 'exhaust_temp' },
				relation: 'at_most',
				limit: 960,
				holdS: 1,
				severity: 'review'
			}
		]
	},
	{
		code: 'LAB-SAFE-2T',
		title: 'Engine safety, two-stroke',
		rules: [
			{
				title: 'Coolant temperature',
				subject: { channel: 'coolant_temp' },
				relation: 'at_most',
				limit: 105,
				holdS: 2,
				severity: 'breach'
			},
			{
				title: 'Exhaust temperature',
				subject: { channel: 'exhaust_temp' },
				relation: 'at_most',
				limit: 820,
				holdS: 1,
				severity: 'review'
			}
		]
	},
	{
		code: 'LAB-DIESEL',
		title: 'Engine safety, diesel, and fuel as ordered',
		rules: [
			{
				title: 'Coolant temperature',
				subject: { channel: 'coolant_temp' },
				relation: 'at_most',
				limit: 108,
				holdS: 2,
				severity: 'breach'
			},
			{
				title: 'Oil pressure',
				subject: { channel: 'oil_pressure' },
				relation: 'at_least',
				limit: 150,
				holdS: 0.5,
				severity: 'breach'
			},
			{
				title: 'Net calorific value of the fuel',
				subject: { fuel: 'lhvMjKg' },
				relation: 'at_least',
				limit: 42.2,
				holdS: 0,
				severity: 'review'
			},
			{
				title: 'Density of the fuel',
				subject: { fuel: 'densityKgM3' },
				relation: 'between',
				limit: [820, 845],
				holdS: 0,
				severity: 'review'
			}
		]
	},
	{
		client: 'TSL',
		code: 'TSL-ENERGY',
		title: 'Energy-flow limit of the fuel programme',
		rules: [
			{
				title: 'Fuel energy flow over speed',
				subject: { channel: 'fuel_energy_flow' },
				relation: 'at_most',
				limit: { over: 'speed', table: ENERGY_FLOW_TABLE },
				holdS: 0.2,
				severity: 'breach'
			},
			{
				title: 'Manifold pressure',
				subject: { channel: 'manifold_pressure' },
				relation: 'at_most',
				limit: 210,
				holdS: 0.2,
				severity: 'breach'
			},
			{
				title: 'Inlet temperature',
				subject: { channel: 'inlet_temp' },
				relation: 'between',
				limit: [15, 35],
				holdS: 1,
				severity: 'review'
			},
			{
				title: 'Octane number of the fuel',
				subject: { fuel: 'ron' },
				relation: 'between',
				limit: [95, 102],
				holdS: 0,
				severity: 'breach'
			},
			{
				title: 'Oxygen in the fuel',
				subject: { fuel: 'oxygenMassPct' },
				relation: 'at_most',
				limit: 3.7,
				holdS: 0,
				severity: 'breach'
			}
		]
	},
	{
		client: 'BVG',
		code: 'BVG-STORE',
		title: 'Electrical store of the generator set',
		rules: [
			{
				title: 'Swing of the electrical store',
				subject: { metric: 'electrical_store_swing' },
				relation: 'at_most',
				limit: 2,
				holdS: 0,
				severity: 'breach'
			},
			{
				title: 'Electrical power',
				subject: { channel: 'electrical_power' },
				relation: 'between',
				limit: [-25, 25],
				holdS: 0.1,
				severity: 'breach'
			},
			{
				title: 'State of charge',
				subject: { channel: 'state_of_charge' },
				relation: 'between',
				limit: [30, 90],
				holdS: 1,
				severity: 'review'
			}
		]
	}
];
