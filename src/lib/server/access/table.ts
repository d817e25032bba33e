/** The six roles (product: who they are and what they may). */
export const ROLES = ['admin', 'manager', 'engineer', 'builder', 'operator', 'client'] as const;
export type Role = (typeof ROLES)[number];

const EVERYONE: readonly Role[] = ROLES;
const FLOOR: readonly Role[] = ['manager', 'engineer', 'operator'];

/**
 * Who may attempt what. Deny is the default: an action that is not here cannot be asked for (a type error).
 * Which rows a person sees is not decided here but by row-level security.
 * The sentence completes "Your role may not …".
 */
export const ACTIONS = {
	'lab.read': { roles: EVERYONE, does: 'read the lab’s cells, fuels and limit sets' },
	'client.read': { roles: EVERYONE, does: 'read clients' },
	'client.create': { roles: ['manager'], does: 'add clients' },
	'cell.write': { roles: ['manager'], does: 'change cells' },
	'fuel.write': { roles: ['manager', 'engineer'], does: 'add or change fuels and batches' },
	'limits.write': { roles: ['manager', 'engineer'], does: 'write limit sets' },
	'engine.read': { roles: EVERYONE, does: 'read engines and builds' },
	'engine.write': { roles: ['manager', 'engineer', 'builder'], does: 'add or change engines' },
	'build.write': { roles: ['manager', 'engineer', 'builder'], does: 'change builds' },
	'build.follow': { roles: EVERYONE, does: 'follow builds' },
	'booking.read': { roles: EVERYONE, does: 'read bookings' },
	'booking.request': { roles: ['manager', 'engineer', 'client'], does: 'request bookings' },
	'booking.decide': { roles: ['manager'], does: 'confirm or decline bookings' },
	'booking.move': { roles: ['manager', 'engineer', 'client'], does: 'move bookings' },
	'booking.cancel': { roles: ['manager', 'engineer', 'client'], does: 'cancel bookings' },
	'closure.write': { roles: ['manager'], does: 'close cells' },
	'run.read': { roles: EVERYONE, does: 'read runs' },
	'run.open': { roles: FLOOR, does: 'open or close a run’s record' },
	'run.flag': { roles: FLOOR, does: 'raise flags' },
	'run.review': { roles: ['manager', 'engineer'], does: 'accept or void runs' },
	'run.attach': { roles: FLOOR, does: 'attach files to runs' },
	'run.log': { roles: FLOOR, does: 'write log lines' },
	'trace.upload': { roles: FLOOR, does: 'upload traces' },
	'trace.map': { roles: FLOOR, does: 'map a trace’s columns' },
	'attachment.read': { roles: EVERYONE, does: 'read attachments' },
	'trend.read': { roles: EVERYONE, does: 'read trends' },
	'schedule.read': { roles: EVERYONE, does: 'read the schedule' },
	'account.own': { roles: EVERYONE, does: 'change an account' },
	'person.admin': { roles: ['admin'], does: 'administer people' },
	'audit.read': { roles: ['admin'], does: 'read the audit trail' }
} as const satisfies Record<string, { roles: readonly Role[]; does: string }>;

export type Action = keyof typeof ACTIONS;
