import { forbidden } from '../problem';
import { ACTIONS, type Action, type Role } from './table';

export { ACTIONS, ROLES, type Action, type Role } from './table';

/** The person a request acts for. `clientId` is set for the role client and for no other. */
export interface Principal {
	personId: string;
	name: string;
	email: string;
	role: Role;
	clientId: string | null;
	units: 'si' | 'us';
	/** How they came in: a browser's session (its id) or a token (its id). */
	via: { kind: 'session' | 'token'; id: string };
}

export function may(who: { role: Role }, action: Action): boolean {
	return (ACTIONS[action].roles as readonly Role[]).includes(who.role);
}

/** @throws Problem 403 when the role may never do this, whatever the row */
export function requireMay(who: { role: Role }, action: Action): void {
	if (!may(who, action)) throw forbidden(ACTIONS[action].does);
}

export function actionsOf(who: { role: Role }): Action[] {
	return (Object.keys(ACTIONS) as Action[]).filter((action) => may(who, action));
}
