import type { PixelPoint } from './place-labels';

/** A place on a line for a word written along it. */
export interface LineLabelPlace {
	readonly x: number;
	readonly y: number;
	/** Clockwise, never upside down: within ±90. */
	readonly angleDeg: number;
}

interface Options {
	readonly width: number;
	readonly height: number;
	/** Length of the word in px. */
	readonly span: number;
	/** Points it should keep away from. */
	readonly avoid: readonly PixelPoint[];
}

/**
 * The straightest free place on a line: inside the frame, far from what must stay visible.
 * Null when the line is too short for the word.
 *
 * Units:   CSS px.
 * Method:  of places every few px, the one with the largest distance to anything to be avoided, less what
 *          the line bends under the word.
 */
export function placeLineLabel(
	line: readonly PixelPoint[],
	{ width, height, span, avoid }: Options
): LineLabelPlace | null {
	const lengths = cumulate(line);
	const total = lengths.at(-1) ?? 0;
	let best: { place: LineLabelPlace; worth: number } | null = null;
	for (let middle = span / 2 + 4; middle <= total - span / 2 - 4; middle += 6) {
		const [from, at, to] = [middle - span / 2, middle, middle + span / 2].map((length) =>
			pointAt(line, lengths, length)
		);
		if (!from || !at || !to) continue;
		const room = Math.min(
			at[0] - span / 2,
			width - at[0] - span / 2,
			at[1] - 10,
			height - at[1] - 10
		);
		if (room < 0) continue;
		const bend = Math.hypot(at[0] - (from[0] + to[0]) / 2, at[1] - (from[1] + to[1]) / 2);
		const free = Math.min(90, ...[from, at, to].flatMap((point) => distances(point, avoid)));
		const worth = free + Math.min(room, 40) * 0.4 - 6 * bend;
		if (!best || worth > best.worth) best = { worth, place: toPlace(from, at, to) };
	}
	return best && best.worth > 24 ? best.place : null;
}

function distances([x, y]: PixelPoint, others: readonly PixelPoint[]): number[] {
	return others.map(([u, v]) => Math.hypot(u - x, v - y));
}

function toPlace(from: PixelPoint, [x, y]: PixelPoint, to: PixelPoint): LineLabelPlace {
	const angle = (Math.atan2(to[1] - from[1], to[0] - from[0]) * 180) / Math.PI;
	return { x, y, angleDeg: angle > 90 ? angle - 180 : angle < -90 ? angle + 180 : angle };
}

function cumulate(line: readonly PixelPoint[]): number[] {
	let length = 0;
	return line.map(([x, y], index) => {
		const before = line[index - 1];
		if (before) length += Math.hypot(x - before[0], y - before[1]);
		return length;
	});
}

function pointAt(
	line: readonly PixelPoint[],
	lengths: readonly number[],
	length: number
): PixelPoint | null {
	const after = lengths.findIndex((reached) => reached >= length);
	const [a, b] = [line[after - 1], line[after]];
	if (!b) return null;
	if (!a) return b;
	const [from = 0, to = 0] = [lengths[after - 1], lengths[after]];
	const share = to > from ? (length - from) / (to - from) : 0;
	return [a[0] + share * (b[0] - a[0]), a[1] + share * (b[1] - a[1])];
}

/** Cuts rings or lines where they leave the frame, so that words stand only on what is seen. */
export function cutToFrame(
	line: readonly PixelPoint[],
	width: number,
	height: number
): PixelPoint[][] {
	const pieces: PixelPoint[][] = [];
	let piece: PixelPoint[] = [];
	for (const point of line) {
		const inside = point[0] > 0 && point[0] < width && point[1] > 0 && point[1] < height;
		if (inside) piece.push(point);
		else if (piece.length > 0) {
			pieces.push(piece);
			piece = [];
		}
	}
	if (piece.length > 0) pieces.push(piece);
	return pieces;
}
