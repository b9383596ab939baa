/** A place that can be reached directly, and how far it is. */
export interface Edge {
	readonly to: number;
	readonly length: number;
}

/**
 * Shortest way from one place of a graph to every other; infinite where there is none.
 *
 * Shapes:  edges[i] leave place i; result, one length a place.
 * Method:  Dijkstra with a binary heap.
 * @throws {RangeError} an edge of negative length
 */
export function computeShortestWays(edges: readonly (readonly Edge[])[], from: number): number[] {
	const lengths = edges.map(() => Number.POSITIVE_INFINITY);
	lengths[from] = 0;
	const heap: Edge[] = [{ to: from, length: 0 }];
	for (let next = takeLeast(heap); next; next = takeLeast(heap)) {
		if (next.length > (lengths[next.to] ?? 0)) continue;
		for (const edge of edges[next.to] ?? []) {
			if (edge.length < 0)
				throw new RangeError('computeShortestWays requires lengths of 0 or more');
			const length = next.length + edge.length;
			if (length >= (lengths[edge.to] ?? 0)) continue;
			lengths[edge.to] = length;
			insert(heap, { to: edge.to, length });
		}
	}
	return lengths;
}

function insert(heap: Edge[], edge: Edge): void {
	heap.push(edge);
	let i = heap.length - 1;
	while (i > 0) {
		const parent = (i - 1) >> 1;
		if (lengthAt(heap, parent) <= lengthAt(heap, i)) break;
		swap(heap, i, parent);
		i = parent;
	}
}

function takeLeast(heap: Edge[]): Edge | undefined {
	const [least] = heap;
	const last = heap.pop();
	if (!least || !last || heap.length === 0) return least;
	heap[0] = last;
	let i = 0;
	for (;;) {
		const [left, right] = [2 * i + 1, 2 * i + 2];
		const child = lengthAt(heap, right) < lengthAt(heap, left) ? right : left;
		if (!(lengthAt(heap, child) < lengthAt(heap, i))) break;
		swap(heap, i, child);
		i = child;
	}
	return least;
}

function lengthAt(heap: readonly Edge[], i: number): number {
	return heap[i]?.length ?? Number.POSITIVE_INFINITY;
}

function swap(heap: Edge[], i: number, j: number): void {
	const [a, b] = [heap[i], heap[j]];
	if (!a || !b) return;
	heap[i] = b;
	heap[j] = a;
}
