import { requirePermission, type Grant } from '$lib/server/access/require-permission';
import type { Permission } from '$lib/server/access/permissions';
import type { Settings } from '$lib/server/config';
import type { Database } from '$lib/server/db/client';
import { createPeopleKeys } from '$lib/server/keys/people-keys';
import { loadSigningKey } from '$lib/server/keys/signing-key';
import { mailSettingOf } from '$lib/server/invitations/mail-setting';
import type { SetClock } from './demo-time';

/** What every step of the seed works with: the same functions as the pages, at the seed's time. */
export type DemoWorld = ReturnType<typeof createDemoWorld>;

export function createDemoWorld(options: { db: Database; clock: SetClock; settings: Settings }) {
	const { db, clock, settings } = options;
	const { OVALRY_KEYS: folder, OVALRY_WRAPPING_KEY: wrappingKey } = settings;
	const keys = createPeopleKeys({ folder, wrappingKey });
	const people = new Map<string, { id: string; name: string; email: string }>();
	return {
		db,
		clock,
		settings,
		keys,
		mail: mailSettingOf(settings, keys),
		signingKey: () => loadSigningKey({ folder, wrappingKey }),
		/** The team by their key of the cast. */
		people,
		/** A grant as the named person would get it; refused like theirs. */
		async grant<P extends Permission>(
			key: string,
			permission: P,
			scope: { labId?: string; studyId?: string }
		): Promise<Grant<P>> {
			const person = people.get(key);
			if (!person) throw new RangeError(`the cast has no ${key}`);
			const locals = { db, clock, person, path: '/' } as unknown as App.Locals;
			return requirePermission(locals, permission, scope);
		}
	};
}
