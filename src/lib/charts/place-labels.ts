export type PixelPoint = readonly [number, number];

export interface Box {
	readonly left: number;
	readonly top: number;
	readonly width: number;
	readonly height: number;
}

/** A label that wants to stand beside an outline. */
export interface LabelWish {
	readonly key: string;
	readonly width: number;
	readonly height: number;
	readonly outline: readonly PixelPoint[];
}

export interface PlacedLabel extends Box {
	readonly key: string;
	/** From the label to its outline, when it stands apart from it. */
	readonly leader: { readonly from: PixelPoint; readonly to: PixelPoint } | null;
}

const directionCount = 24;
const gaps = [5, 14, 32, 56, 84];
const leaderFrom = 24;

/**
 * Puts labels where they hide least: beside their outlines, inside the frame, off dots and each other.
 * The same wishes always give the same places.
 *
 * Units:   CSS px.
 * Method:  each wish in turn takes the cheapest of 24 directions × 5 gaps; a dot under the label costs 2,
 *          a px of distance 0.12, touching another label or the frame's edge 200.
 */
export function placeLabels(
	wishes: readonly LabelWish[],
	{ frame, dots }: { frame: Box; dots: readonly PixelPoint[] }
): PlacedLabel[] {
	const placed: PlacedLabel[] = [];
	const outlines = wishes.flatMap((wish) => wish.outline);
	for (const wish of wishes) {
		const candidates = listCandidates(wish);
		const cost = (candidate: PlacedLabel & { gap: number }) =>
			0.12 * candidate.gap +
			2 * countInside(dots, candidate, 2) +
			3 * countInside(outlines, candidate, 3) +
			200 * placed.filter((other) => touches(other, candidate)).length +
			(isWithin(candidate, frame) ? 0 : 200);
		const [best] = candidates
			.map((candidate) => ({ candidate, cost: cost(candidate) }))
			.sort((a, b) => a.cost - b.cost);
		if (best) placed.push(best.candidate);
	}
	return placed;
}

function listCandidates(wish: LabelWish): (PlacedLabel & { gap: number })[] {
	const directions = Array.from({ length: directionCount }, (_, index) => {
		const angle = -Math.PI / 2 + (2 * Math.PI * index) / directionCount;
		return [Math.cos(angle), Math.sin(angle)] as const;
	});
	return gaps.flatMap((gap) => directions.map((direction) => putBeside(wish, direction, gap)));
}

/** The label beyond the outline's farthest point in one direction. */
function putBeside(wish: LabelWish, [dx, dy]: PixelPoint, gap: number) {
	const farthest = wish.outline.reduce<PixelPoint>(
		(best, point) => (point[0] * dx + point[1] * dy > best[0] * dx + best[1] * dy ? point : best),
		wish.outline[0] ?? [0, 0]
	);
	const reach = gap + (Math.abs(dx) * wish.width + Math.abs(dy) * wish.height) / 2;
	const [cx, cy] = [farthest[0] + dx * reach, farthest[1] + dy * reach];
	const box = {
		left: cx - wish.width / 2,
		top: cy - wish.height / 2,
		width: wish.width,
		height: wish.height
	};
	const leader = gap >= leaderFrom ? { from: nearestEdge(box, farthest), to: farthest } : null;
	return { key: wish.key, gap, leader, ...box };
}

function nearestEdge(box: Box, [x, y]: PixelPoint): PixelPoint {
	const clamp = (value: number, low: number, size: number) =>
		Math.min(low + size, Math.max(low, value));
	return [clamp(x, box.left, box.width), clamp(y, box.top, box.height)];
}

function countInside(points: readonly PixelPoint[], box: Box, padding: number): number {
	return points.filter(
		([x, y]) =>
			x > box.left - padding &&
			x < box.left + box.width + padding &&
			y > box.top - padding &&
			y < box.top + box.height + padding
	).length;
}

export function touches(a: Box, b: Box): boolean {
	return (
		a.left < b.left + b.width &&
		b.left < a.left + a.width &&
		a.top < b.top + b.height &&
		b.top < a.top + a.height
	);
}

function isWithin(box: Box, frame: Box): boolean {
	return (
		box.left >= frame.left &&
		box.top >= frame.top &&
		box.left + box.width <= frame.left + frame.width &&
		box.top + box.height <= frame.top + frame.height
	);
}

/** Width of a line of text, close enough to keep labels apart. */
export function estimateTextWidth(text: string, fontSizePx: number): number {
	return text.length * fontSizePx * 0.53;
}
