import type { IncomingMessage } from 'node:http';
import type { Principal } from '$lib/server/access';
import type { Deps } from '$lib/server/deps';

declare global {
	namespace App {
		interface Error {
			message: string;
			/** Quote it when asking for help: the log has the rest. */
			requestId?: string;
		}
		/** What Node's adapter passes on. */
		interface Platform {
			req?: IncomingMessage;
		}
		interface PageData {
			/** The units in which this reader is shown figures. */
			units?: 'si' | 'us';
		}
		interface Locals {
			deps: Deps;
			who: Principal | null;
			requestId: string;
			theme: 'light' | 'dark' | 'system';
		}
	}
}

export {};
