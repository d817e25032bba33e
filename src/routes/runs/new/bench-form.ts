import { z } from 'zod';
import { INDUCTIONS } from '$lib/domain/model';

const number = z.number({ error: 'Give a number.' });
const above = number.positive('Must be above zero.');

/**
 * An engine in as few fields as a first trace needs; what most engines and labs have is filled in and stands to be changed.
 * A machine is assumed small: the schedule then warns too early, never too late.
 */
export const BenchForm = z.object({
	client: z.string().default(''),
	clientName: z.string().trim().max(200, 'At most 200 characters.').default(''),
	engineName: z.string().trim().min(1, 'Give the engine a name.').max(200, 'At most 200 characters.'),
	displacementL: above
		.max(5000, 'In litres; this is too large.')
		.nullable()
		.default(null)
		.refine((value) => value !== null, 'Give a number.'),
	cylinders: number
		.refine(Number.isInteger, 'Give a whole number.')
		.min(1, 'At least 1.')
		.max(64, 'At most 64.')
		.default(4),
	strokesPerCycle: z.enum(['2', '4']).default('4'),
	ignition: z.enum(['spark', 'compression']).default('spark'),
	induction: z.enum(INDUCTIONS).default('natural'),
	fuelName: z.string().trim().max(200, 'At most 200 characters.').default('Petrol'),
	lhvMjKg: number
		.min(1, 'Between 1 and 142 MJ/kg.')
		.max(142, 'Between 1 and 142 MJ/kg.')
		.nullable()
		.default(null),
	cellName: z.string().trim().max(200, 'At most 200 characters.').default('Cell 1'),
	absorberKind: z.enum(['eddy_current', 'water_brake', 'ac', 'dc', 'hydraulic']).default('ac'),
	maxPowerKw: above.default(100),
	maxTorqueNm: above.default(200),
	maxSpeedRpm: above.default(6000)
});
