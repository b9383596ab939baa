export type PlanePoint = readonly [number, number];

/** An edge of a grid that a line of a picture crosses, and where. */
export interface Crossing {
	readonly key: string;
	readonly point: PlanePoint;
}

/** Joins the pieces of lines inside the cells of a grid at their common crossings. */
export function joinSegments(segments: readonly [Crossing, Crossing][]): PlanePoint[][] {
	const neighbours = new Map<string, { at: Crossing; to: Crossing[] }>();
	for (const [a, b] of segments) {
		link(neighbours, a, b);
		link(neighbours, b, a);
	}
	const seen = new Set<string>();
	const starts = [...neighbours.values()].sort((a, b) => a.to.length - b.to.length);
	return starts.flatMap(({ at }) => (seen.has(at.key) ? [] : [walk(neighbours, at, seen)]));
}

function link(
	neighbours: Map<string, { at: Crossing; to: Crossing[] }>,
	at: Crossing,
	to: Crossing
): void {
	const known = neighbours.get(at.key);
	if (known) known.to.push(to);
	else neighbours.set(at.key, { at, to: [to] });
}

/** Follows a branch from one end, or once round when it is closed. */
function walk(
	neighbours: ReadonlyMap<string, { at: Crossing; to: Crossing[] }>,
	start: Crossing,
	seen: Set<string>
): PlanePoint[] {
	const points: PlanePoint[] = [];
	let at: Crossing | undefined = start;
	while (at) {
		seen.add(at.key);
		points.push(at.point);
		const next: Crossing | undefined = neighbours
			.get(at.key)
			?.to.find((other) => !seen.has(other.key));
		if (!next && points.length > 2 && isNeighbour(neighbours, at, start)) points.push(start.point);
		at = next;
	}
	return points;
}

function isNeighbour(
	neighbours: ReadonlyMap<string, { at: Crossing; to: Crossing[] }>,
	a: Crossing,
	b: Crossing
): boolean {
	return neighbours.get(a.key)?.to.some((other) => other.key === b.key) ?? false;
}
