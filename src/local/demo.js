/** Who may sign in to the demo laboratory, for the greeting; a test compares it with the people that are made. */

export const DEMO_PASSWORD = 'a swinging stator weighs torque';

export const DEMO_STAFF = ['admin', 'manager', 'engineer', 'builder', 'operator', 'maud', 'corin'].map(
	(name) => `${name}@fellmoor.example`
);

export const DEMO_CLIENTS = [
	'merrin@quillmere.example',
	'aldous@brackvolt.example',
	'sunniva@larkhollow.example',
	'garrick@sodderholt.example',
	'ilka@tessolane.example'
];

/** @param {NodeJS.ProcessEnv} env */
export const wantsDemo = (env) => env.TRUNNION_DEMO !== 'off';
