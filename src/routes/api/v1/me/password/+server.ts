import { z } from 'zod';
import { operation } from '$lib/server/api';
import { changePassword, PasswordChange } from '$lib/server/auth';

export const POST = operation({
	id: 'changePassword',
	summary: 'Another password; all other sessions end, and a mail says so',
	action: 'account.own',
	body: PasswordChange,
	answer: z.null(),
	status: 204,
	run: async ({ deps, who, body }) => {
		await changePassword(deps, who, body);
		return null;
	}
});
