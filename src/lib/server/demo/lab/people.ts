import type { Role } from '../../access';

/** One password for everybody in the demo lab; the README and the end of the seed say it too. */
export const DEMO_PASSWORD = 'a swinging stator weighs torque';

export const DEMO_CLIENTS = [
	{ code: 'QMS', name: 'Quillmere Sprint Craft' },
	{ code: 'BVG', name: 'Brackvolt Generators' },
	{ code: 'LHA', name: 'Larkhollow Aero' },
	{ code: 'SFM', name: 'Sodderholt Farm Machinery' },
	{ code: 'TSL', name: 'Tessolane Fuels' }
] as const;

export interface DemoPerson {
	key: string;
	email: string;
	name: string;
	role: Role;
	client?: string;
}

const staff = (
	role: Exclude<Role, 'client'>,
	name: string,
	more?: { key: string; mail: string }
): DemoPerson => ({
	key: more?.key ?? role,
	email: `${more?.mail ?? role}@fellmoor.example`,
	name,
	role
});
const customer = (client: string, given: string, family: string, house: string): DemoPerson => ({
	key: client,
	email: `${given.toLowerCase()}@${house}.example`,
	name: `${given} ${family}`,
	role: 'client',
	client
});

/** Invented people. Staff by their role, two of them for the second shift; one customer for each client by its code. */
export const DEMO_PEOPLE: readonly DemoPerson[] = [
	staff('admin', 'Wenna Ostlake'),
	staff('manager', 'Orrin Haskefell'),
	staff('engineer', 'Tilda Vexmoor'),
	staff('builder', 'Bram Quarrowby'),
	staff('operator', 'Junia Peverstock'),
	staff('engineer', 'Maud Ellerbarrow', { key: 'engineer2', mail: 'maud' }),
	staff('operator', 'Corin Thaddlewick', { key: 'operator2', mail: 'corin' }),
	customer('QMS', 'Merrin', 'Tolgarth', 'quillmere'),
	customer('BVG', 'Aldous', 'Frindle', 'brackvolt'),
	customer('LHA', 'Sunniva', 'Corbrake', 'larkhollow'),
	customer('SFM', 'Garrick', 'Ommerly', 'sodderholt'),
	customer('TSL', 'Ilka', 'Marrendine', 'tessolane')
];
