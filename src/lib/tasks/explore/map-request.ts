import type { TaskRecord } from '$scheduler/tasks/task-record';
import type { TaskWindow } from '$scheduler/tasks/error-grid';
import type { Point } from '$lib/charts/cloud-data';
import type { Theme } from './map-colours';

/** A map that is wanted: of which task, over which two variables, how large on the screen. */
export interface MapRequest {
	readonly record: TaskRecord;
	readonly axes: readonly [number, number];
	/** Values of all variables; those of the two axes are not looked at. */
	readonly point: readonly number[];
	readonly window: TaskWindow;
	/** Coarse while something is dragged, fine at rest. */
	readonly quality: 'coarse' | 'fine';
	/** Device pixels. */
	readonly pixels: { readonly width: number; readonly height: number };
	readonly theme: Theme;
	/** The end of the colour scale; null: chosen from the map. Kept while something is dragged. */
	readonly top: number | null;
	/** A target shift whose line of perfect trials is drawn as well, in the unit of the result. */
	readonly shift: number | null;
}

/** One contour line: all rings around misses of at least this size. */
export interface Contour {
	readonly miss: number;
	readonly rings: readonly (readonly Point[])[];
}

export interface MapPicture {
	readonly window: TaskWindow;
	readonly image: {
		readonly pixels: Uint8ClampedArray<ArrayBuffer>;
		readonly width: number;
		readonly height: number;
	};
	readonly top: number;
	readonly contours: readonly Contour[];
	readonly zero: readonly (readonly Point[])[];
	/** Where a map of as many results as variables has its single solutions. */
	readonly solutions: readonly Point[];
	/** Edges of the band of hits. */
	readonly edges: readonly (readonly Point[])[];
	readonly shifted: readonly (readonly Point[])[];
	/** Around executions without a valid outcome. */
	readonly invalid: readonly (readonly Point[])[];
	readonly facts: MapFacts;
}

/** What can be counted on a map. */
export interface MapFacts {
	/** Points along both axes. */
	readonly grid: readonly [number, number];
	readonly quality: 'coarse' | 'fine';
	readonly invalidShare: number;
	readonly hitShare: number;
	/** Every execution whose second variable lies below this has no valid outcome; null: none such. */
	readonly deadBelow: number | null;
	/** Middle of the range of misses, and the smallest found. */
	readonly least: number;
	readonly computeMs: number;
}
