import type { TaskRecord } from '$scheduler/tasks/task-record';
import type { TaskWindow } from '$scheduler/tasks/error-grid';
import type { Point } from '$lib/charts/cloud-data';
import type { CloudComparison } from './compare-cloud';
import type { ForgivingPoint } from './forgiveness';
import type { Theme } from './map-colours';
import type { RegionFacts } from './region-facts';

/** How a penalized region is tried out: around a place, so many scales along the solutions and across. */
export interface RegionWish {
	readonly center: readonly number[];
	readonly alongSd: number;
	readonly acrossSd: number;
}

/** What is asked about a cloud of trials; slower than the map, so it is asked once things stand still. */
export interface CloudRequest {
	readonly record: TaskRecord;
	readonly axes: readonly [number, number];
	readonly point: readonly number[];
	/** Where the trials should lie; they are brought to the nearest perfect trial. */
	readonly place: readonly number[];
	readonly trials: number;
	readonly alongSd: number;
	readonly acrossSd: number;
	readonly seed: number;
	/** Key of the second coordinate system. */
	readonly second: string;
	readonly region: RegionWish | null;
	/** Lines of perfect trials of the map that is shown. */
	readonly lines: readonly (readonly Point[])[];
	readonly theme: Theme;
	/** Device pixels of a small map. */
	readonly pixels: { readonly width: number; readonly height: number };
	readonly top: number;
}

/** One small map with the cloud in it. */
export interface Panel {
	readonly window: TaskWindow;
	readonly image: {
		readonly pixels: Uint8ClampedArray<ArrayBuffer>;
		readonly width: number;
		readonly height: number;
	};
	readonly zero: readonly (readonly Point[])[];
	readonly edges: readonly (readonly Point[])[];
	readonly trials: readonly Point[];
	readonly ellipse: PlaneShape | null;
}

export interface PlaneShape {
	readonly center: readonly [number, number];
	readonly shape: readonly [readonly [number, number], readonly [number, number]];
}

export interface CloudPicture {
	/** Middle of the invented trials, on the solutions where there are some near. */
	readonly center: readonly number[];
	readonly isOnSolutions: boolean;
	readonly trials: readonly (readonly number[])[];
	readonly comparison: CloudComparison;
	readonly first: Panel;
	/** Null where a trial cannot be written in the second system. */
	readonly second: Panel | null;
	readonly forgiveness: readonly (readonly ForgivingPoint[])[];
	/** Along curves in more than two dimensions rather than along a slice. */
	readonly isWholeCurve: boolean;
	readonly here: number;
	readonly region:
		(RegionFacts & { readonly drawn: PlaneShape; readonly hitAreaShare: number | null }) | null;
}

/** A point of a surface of perfect trials, or a stretch of a curve. */
export interface SpacePoint {
	readonly at: readonly number[];
	/** Corners of a small tile of the surface around it. */
	readonly tile: readonly (readonly number[])[];
	/** Share of the cloud that hits when it is carried there. */
	readonly share: number;
}

export interface SpaceRequest {
	readonly record: TaskRecord;
	readonly center: readonly number[];
	readonly trials: readonly (readonly number[])[];
}

export interface SpacePicture {
	/** Tiles of a surface (two free directions). */
	readonly points: readonly SpacePoint[];
	/** Curves (one free direction). */
	readonly curves: readonly (readonly SpacePoint[])[];
	readonly isComplete: boolean;
}
