import type { DemoRun, HandFlag, DemoLogLine, Outcome } from './run';

/** What happened to single runs of the year, by their name. */
interface Happening {
	outcome?: Outcome;
	log?: DemoLogLine[];
	flags?: HandFlag[];
	disturbances?: DemoRun['disturbances'];
	test?: DemoRun['test'];
	crosses?: number;
}

/** Store runs of a generator set: 20 s a stretch or so. */
export const STORE_SWING: DemoRun['test'] = {
	is: 'electrical',
	speedRpm: 3000,
	stretches: [
		{ seconds: 15, load: 0.7, electricalKw: 0 },
		{ seconds: 60, load: 0.9, electricalKw: 22 },
		{ seconds: 55, load: 0.85, electricalKw: 21 },
		{ seconds: 25, load: 0.6, electricalKw: -12 }
	]
};

export const HAPPENINGS: Readonly<Record<string, Happening>> = {
	'qm-24-1-d235-1': {
		outcome: {
			state: 'voided',
			by: 'engineer',
			reason: 'Knock on cylinder 2 in the top third; ignition was taken back and the pull repeated.'
		},
		flags: [{ by: 'operator', severity: 'breach', reason: 'Knock heard above 6400 rev/min.', span: [36, 40] }]
	},
	'qm-24-2-d60-1': {
		disturbances: [{ channel: 'oil_pressure', atS: 29, lastsS: 1.8, by: -210 }],
		crosses: 1,
		log: [{ minute: 9, text: 'Oil pressure dipped while the speed rose; sump level was at the lower mark.' }],
		outcome: { state: 'closed' }
	},
	'sd-45-1-d187-1': {
		outcome: {
			state: 'voided',
			by: 'manager',
			reason: 'Brake water ran warm and the load would not hold; hose found kinked.'
		},
		flags: [{ by: 'operator2', severity: 'review', reason: 'Brake water outlet above 60 °C.' }]
	},
	'lh-58-1-d152-1': {
		disturbances: [
			{ channel: 'exhaust_temp.1', atS: 14, lastsS: 3.5, by: 240 },
			{ channel: 'exhaust_temp.1', atS: 24, lastsS: 2.2, by: 220 }
		],
		crosses: 1,
		log: [{ minute: 4, text: 'Cylinder 1 ran hot twice; float needle was sticking.' }],
		outcome: { state: 'closed' }
	},
	'ts-14-1-d38-1': {
		test: {
			is: 'capped',
			plan: { fromRpm: 1800, toRpm: 6500, rateRpmS: 120 },
			overshoots: [
				{ atS: 8.6, lastsS: 0.8, by: 0.024 },
				{ atS: 27.5, lastsS: 1.1, by: 0.019 },
				{ atS: 33, lastsS: 0.6, by: 0.028 }
			]
		},
		crosses: 1,
		log: [{ minute: 3, text: 'Faster control hunts; three short overshoots seen live.' }],
		outcome: { state: 'accepted', by: 'engineer', reason: 'Overshoots are real and told to the customer.' }
	},
	'bv-16-b-d84-1': {
		log: [
			{ minute: -8, text: 'Fuel temperature 31 °C at the meter.' },
			{
				minute: -2,
				text: 'Fuel temperature 21 °C at the meter.',
				corrects: { text: 'Fuel temperature 31 °C at the meter.', reason: 'Misread: 21, not 31.' }
			}
		]
	},
	'qm-24-1-d163-1': {
		log: [
			{ minute: 7, text: 'Second pull follows in cell 3 tomorrow.' },
			{
				minute: 12,
				text: 'Engine goes over to cell 3 after the second pull today.',
				corrects: {
					text: 'Second pull follows in cell 3 tomorrow.',
					reason: 'Both pulls are run here first.'
				}
			}
		]
	},
	'lh-58-2-d55-1': {
		flags: [
			{ by: 'engineer2', severity: 'note', reason: 'Throttle cable slack of 3 mm found after the pull.' }
		]
	}
};
