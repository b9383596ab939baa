import type { z } from 'zod';
import { fetchJson } from './fetch-json';

type Options<Schema extends z.ZodType> = {
	address: () => string;
	schema: Schema;
	everyMs?: number;
};

/**
 * Looks at an address again and again while the page is open and seen. After a failure it waits
 * longer each time, up to a minute, and `isStale` says that what is shown is from before.
 */
export function watchJson<Schema extends z.ZodType>(options: Options<Schema>) {
	const { address, schema, everyMs = 10_000 } = options;
	let latest = $state.raw<{ address: string; value: z.output<Schema> } | null>(null);
	let isStale = $state(false);
	let failures = 0;
	let lookNow: (() => Promise<void>) | undefined;

	$effect(() => {
		const watched = address();
		const leave = new AbortController();
		let timer: ReturnType<typeof setTimeout> | undefined;
		const look = async () => {
			clearTimeout(timer);
			const answer = await fetchJson(watched, schema, { signal: leave.signal }).catch(() => null);
			if (!answer || leave.signal.aborted) return;
			failures = answer.ok ? 0 : failures + 1;
			isStale = !answer.ok;
			if (answer.ok) latest = { address: watched, value: answer.value };
			wait();
		};
		const wait = () => {
			timer = setTimeout(() => void look(), Math.min(60_000, everyMs * 2 ** failures));
		};
		const seen = () => {
			if (document.visibilityState === 'visible') void look();
			else clearTimeout(timer);
		};
		lookNow = look;
		document.addEventListener('visibilitychange', seen);
		wait();
		return () => {
			leave.abort();
			clearTimeout(timer);
			document.removeEventListener('visibilitychange', seen);
		};
	});

	return {
		/** The newest answer for the present address; null until the first came. */
		get value() {
			return latest?.address === address() ? latest.value : null;
		},
		get isStale() {
			return isStale;
		},
		/** Looks again at once, as after a change of one's own. */
		refresh: async () => lookNow?.()
	};
}
