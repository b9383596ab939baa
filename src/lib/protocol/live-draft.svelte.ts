import type { ProtocolDraft } from './protocol-draft';

/**
 * Visits and arms change by the functions of `edit/` alone, which share what stays the same: reading
 * them is cheap however many blocks there are. The other parts are bound to fields.
 */
const sharedParts = new Set<string>(['visits', 'arms']);

/** A draft that fields may be bound to. Its visits and arms are replaced as a whole, never written into. */
export function createLiveDraft(start: ProtocolDraft): ProtocolDraft {
	const live = {};
	for (const [key, value] of Object.entries(start)) {
		if (sharedParts.has(key)) defineShared(live, key, value);
		else defineBound(live, key, value);
	}
	return live as ProtocolDraft;
}

function defineShared(live: object, key: string, value: unknown): void {
	let part = $state.raw(value);
	Object.defineProperty(live, key, {
		enumerable: true,
		get: () => part,
		set: (next: unknown) => (part = next)
	});
}

function defineBound(live: object, key: string, value: unknown): void {
	let part = $state($state.snapshot(value));
	Object.defineProperty(live, key, {
		enumerable: true,
		get: () => part,
		set: (next: unknown) => (part = $state.snapshot(next))
	});
}

/** The draft as it stands now, sharing with `before` every part that is the same. */
export function takeSnapshot(live: ProtocolDraft, before: ProtocolDraft): ProtocolDraft {
	const parts = Object.entries(live).map(([key, part]) => {
		const old: unknown = before[key as keyof ProtocolDraft];
		if (sharedParts.has(key) || part === old) return [key, part] as const;
		const isSame = JSON.stringify(part) === JSON.stringify(old);
		return [key, isSame ? old : ($state.snapshot(part) as unknown)] as const;
	});
	const isWhole = parts.every(([key, part]) => part === before[key as keyof ProtocolDraft]);
	return isWhole ? before : (Object.fromEntries(parts) as ProtocolDraft);
}

/** Puts another state into the live draft; parts that stay the same are not touched. */
export function putSnapshot(live: ProtocolDraft, now: ProtocolDraft, next: ProtocolDraft): void {
	for (const key of Object.keys(next) as (keyof ProtocolDraft)[]) {
		if (next[key] !== now[key]) Object.assign(live, { [key]: next[key] });
	}
}
