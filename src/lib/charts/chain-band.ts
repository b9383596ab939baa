export type StopState = 'done' | 'booked' | 'proposed' | 'missed' | 'open';

export interface ChainStop {
	/** "baseline", "day 1". */
	readonly label: string;
	/** Under the oval: "Thu 18 Mar 09:30". */
	readonly detail?: string | undefined;
	readonly state: StopState;
}

export interface ChainGap {
	/** Hours from one start to the next. */
	readonly hours: number;
	/** A pause or a clock change is amber, a broken rule rose. */
	readonly tone?: 'plain' | 'amber' | 'rose' | undefined;
}

/**
 * Where the stops of a chain stand on a line: a long gap is longer, but a week does not squeeze the days.
 *
 * Units:   0 to 1; widths go with the square root of the hours.
 * @throws {RangeError} gaps that are not one fewer than the stops
 */
export function placeStops(stopCount: number, gaps: readonly ChainGap[]): number[] {
	if (gaps.length !== Math.max(0, stopCount - 1)) {
		throw new RangeError('a chain has one gap fewer than stops');
	}
	const widths = gaps.map(({ hours }) => Math.sqrt(Math.max(1, hours)));
	const total = widths.reduce((sum, width) => sum + width, 0) || 1;
	let reached = 0;
	return [0, ...widths.map((width) => (reached += width) / total)].slice(0, stopCount);
}

/** Width of the line at which the two nearest stops are `apart` px from each other. */
export function findLeastWidth(
	stopCount: number,
	gaps: readonly ChainGap[],
	apart: number
): number {
	const places = placeStops(stopCount, gaps);
	const shares = places.slice(1).map((at, index) => at - (places[index] ?? 0));
	return shares.length > 0 ? Math.ceil(apart / Math.min(...shares)) : 0;
}

/** "24 h", "22.5 h": whole hours without a digit, others with one. */
export function formatHours(hours: number): string {
	const rounded = Math.round(hours * 10) / 10;
	return `${Number.isInteger(rounded) ? rounded : rounded.toFixed(1)} h`;
}

/** The chain in words, for readers. */
export function describeChain(stops: readonly ChainStop[], gaps: readonly ChainGap[]): string {
	return stops
		.map((stop, index) => {
			const gap = gaps[index - 1];
			const words = [stop.label, stop.detail].filter(Boolean).join(' ');
			return gap ? `${formatHours(gap.hours)} later ${words}` : words;
		})
		.join(', ');
}
