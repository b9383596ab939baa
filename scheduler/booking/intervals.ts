import type { Interval } from './types.ts';

/** Half-open intervals that share at least an instant. */
export function overlaps(a: Interval, b: Interval): boolean {
	return a.fromMs < b.toMs && b.fromMs < a.toMs;
}

/** Whether one of the intervals (merged, ascending) holds all of `inner`. */
export function covers(merged: readonly Interval[], inner: Interval): boolean {
	let low = 0;
	let high = merged.length - 1;
	while (low <= high) {
		const middle = (low + high) >> 1;
		const one = merged[middle];
		if (!one) return false;
		if (one.toMs <= inner.fromMs) low = middle + 1;
		else if (one.fromMs > inner.fromMs) high = middle - 1;
		else return inner.toMs <= one.toMs;
	}
	return false;
}

/** Sorted, non-empty, with touching and overlapping intervals joined. */
export function mergeIntervals(intervals: readonly Interval[]): Interval[] {
	const sorted = intervals.filter(({ fromMs, toMs }) => fromMs < toMs);
	const merged: Interval[] = [];
	for (const { fromMs, toMs } of sorted.sort((a, b) => a.fromMs - b.fromMs)) {
		const last = merged.at(-1);
		if (last && fromMs <= last.toMs) last.toMs = Math.max(last.toMs, toMs);
		else merged.push({ fromMs, toMs });
	}
	return merged;
}

/** What of `open` (merged) no interval of `busy` touches. */
export function subtractIntervals(
	open: readonly Interval[],
	busy: readonly Interval[]
): Interval[] {
	const taken = mergeIntervals(busy);
	return open.flatMap(({ fromMs, toMs }) => {
		const free: Interval[] = [];
		let cursor = fromMs;
		for (const one of taken) {
			if (one.toMs <= cursor || one.fromMs >= toMs) continue;
			if (one.fromMs > cursor) free.push({ fromMs: cursor, toMs: one.fromMs });
			cursor = Math.max(cursor, one.toMs);
		}
		if (cursor < toMs) free.push({ fromMs: cursor, toMs });
		return free;
	});
}
