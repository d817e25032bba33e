import { linkPage } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';

const page = linkPage('invitation');

export const load: PageServerLoad = page.load;
export const actions: Actions = { default: page.choose };
