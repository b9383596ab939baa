import type { Database } from '$lib/server/db/client';
import type { Clock } from '$lib/server/clock';
import type { InstanceKind } from '$lib/server/instance/load-instance';

declare global {
	namespace App {
		interface Error {
			message: string;
			errorId?: string;
		}
		interface Locals {
			db: Database;
			clock: Clock;
			/** Who is signed in in this browser; null for nobody. */
			person: { id: string; name: string; email: string } | null;
			sessionToken: string | null;
			/** demo and rehearsal have a clock that can be moved and people to enter as. */
			instanceKind: InstanceKind;
			/** Path and query of this request, for coming back after sign-in. */
			path: string;
			requestId: string;
		}
	}
}

export {};
