import { norm, subtract, type Vector } from '../linear-algebra/vector.ts';

/** Points in cells of one width, to find those near a place without looking at all. */
export class NeighbourGrid {
	private readonly cells = new Map<string, number[]>();
	private readonly width: number;
	readonly points: (readonly number[])[] = [];

	/** @param width largest distance that will be asked for */
	constructor(width: number) {
		this.width = width;
	}

	/** Adds a point and gives its number. */
	add(point: Vector): number {
		const key = this.cellOf(point).join(' ');
		const index = this.points.push([...point]) - 1;
		this.cells.set(key, [...(this.cells.get(key) ?? []), index]);
		return index;
	}

	/** Numbers of all points nearer than a distance, at most the width. */
	findNear(point: Vector, distance: number): number[] {
		const keys = this.cellOf(point).reduce<number[][]>(
			(found, place) => found.flatMap((key) => [-1, 0, 1].map((step) => [...key, place + step])),
			[[]]
		);
		return keys
			.flatMap((key) => this.cells.get(key.join(' ')) ?? [])
			.filter((index) => norm(subtract(this.points[index] ?? [], point)) < distance);
	}

	private cellOf(point: Vector): number[] {
		return point.map((value) => Math.floor(value / this.width));
	}
}
