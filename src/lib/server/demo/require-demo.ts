import { error } from '@sveltejs/kit';
import { config } from '$lib/server/config';

declare const granted: unique symbol;
/** Proof that this is a demo or a rehearsal, where anybody may be anybody. */
export type DemoGrant = { readonly [granted]: 'demo'; readonly kind: 'demo' | 'rehearsal' };

/**
 * The first line of every entry of the demo: the mode and the database must both say demo, else the
 * address does not exist.
 */
export function requireDemo(locals: App.Locals): DemoGrant {
	const kind = locals.instanceKind;
	if (config().OVALRY_MODE !== 'demo' || kind === 'own') error(404, 'Not found');
	return { kind } as unknown as DemoGrant;
}
