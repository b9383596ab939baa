import { createContext } from 'svelte';
import type { Fault } from '$lib/protocol/fault';

/** Gives each field of the form what is wrong with it, in one line. */
type FieldFaults = (field: string) => string[] | undefined;

export const [readFieldFaults, provideFieldFaults] = createContext<FieldFaults>();

const missing = /-missing$|^no-|nameless|comparison-arms|name-unreadable/;

/**
 * What stands under a field: what was typed wrongly at once, what is only missing after somebody
 * tried to freeze.
 */
export function faultTexts(faults: readonly Fault[], field: string, wasTried: boolean) {
	const found = faults.filter(
		(fault) =>
			fault.field === field && fault.level === 'fault' && (wasTried || !missing.test(fault.code))
	);
	return found.length > 0 ? found.map(({ text, remedy }) => `${text} ${remedy}`) : undefined;
}
