import type { Deps } from '../deps';
import type { JobData } from '../jobs';
import { notify, notifyOfAccount } from './notify';
import { sendMail } from './send';

export { closeMail } from './transport';

/** The worker's tasks of this subject. */
export function mailHandlers(deps: Deps) {
	return {
		'mail.notify': (data: JobData<'mail.notify'>) => notify(deps, data),
		'mail.account': (data: JobData<'mail.account'>) => notifyOfAccount(deps, data),
		'mail.send': (data: JobData<'mail.send'>) => sendMail(deps, data)
	};
}
