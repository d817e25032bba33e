import { operation } from '$lib/server/api';
import { changeMe, MeChange, MeView, readMe } from '$lib/server/auth';

export const GET = operation({
	id: 'getMe',
	summary: 'Your own account',
	action: 'account.own',
	answer: MeView,
	run: ({ deps, who }) => readMe(deps, who)
});

export const PATCH = operation({
	id: 'changeMe',
	summary: 'Your name, and the units that screens show you; answers of the API are in internal units always',
	action: 'account.own',
	body: MeChange,
	answer: MeView,
	run: ({ deps, who, body, ifMatch }) => changeMe(deps, who, body, ifMatch)
});
