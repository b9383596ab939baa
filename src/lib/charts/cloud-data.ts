import type { PlaneEllipse } from './ellipse-path';

export type Point = readonly [number, number];

/** One axis of a picture: what it measures, in which unit, from where to where. */
export interface Axis {
	readonly label: string;
	/** Empty when the ticks carry it (an angle's degree sign). */
	readonly unit: string;
	readonly domain: readonly [number, number];
	/** Behind each tick, such as "°". */
	readonly tickSuffix?: string | undefined;
}

/** The result over the window; values[j][i] at (x[i], y[j]), null where the task has no result. */
export interface ErrorGrid {
	readonly x: readonly number[];
	readonly y: readonly number[];
	readonly values: readonly (readonly (number | null)[])[];
}

/** own: this person's cloud (solid). region: penalized (hatched). expected: forecast (dashed). */
export type EllipseKind = 'own' | 'region' | 'expected' | 'other';

export interface DrawnEllipse extends PlaneEllipse {
	readonly kind: EllipseKind;
	/** Written beside it. */
	readonly label?: string | undefined;
	/** A second, quieter line. */
	readonly detail?: string | undefined;
}

/** How results are written: 0.2 m as "20 cm over". */
export interface ResultWords {
	readonly unit: string;
	/** From the task's unit to the one written: 100 from m to cm. */
	readonly factor: number;
	/** Words behind the size on either side of zero; without them a sign is written. */
	readonly below?: string | undefined;
	readonly above?: string | undefined;
}

/** A limit of the rig or of the table: a dotted line with its name. */
export interface BoundLine {
	readonly axis: 'x' | 'y';
	readonly at: number;
	readonly label: string;
}

/** Everything a CloudChart draws, in the task's own units. */
export interface CloudData {
	readonly x: Axis;
	readonly y: Axis;
	readonly grid: ErrorGrid | null;
	/** Polylines where the result is 0. */
	readonly zeroSet: readonly (readonly Point[])[];
	/** Largest miss that counts as a hit; null draws no band. */
	readonly tolerance: number | null;
	readonly result: ResultWords;
	readonly trials: readonly Point[];
	readonly ellipses: readonly DrawnEllipse[];
	/** Where the person is expected to go, from here to there. */
	readonly arrow?: { readonly from: Point; readonly to: Point } | null;
	/** Other ways out that were weighed: a small dashed ring. */
	readonly places?: readonly { readonly at: Point; readonly label: string }[];
	readonly bounds?: readonly BoundLine[];
	/** Written on the zero set; empty for none. */
	readonly zeroLabel?: string;
}
