import type { Point } from '$lib/charts/cloud-data';

/** What a line or a place of a workspace picture stands for; the picture gives it its look. */
export type SceneLook =
	/** What the ball, puck or cart does up to the moment that counts. */
	| 'way'
	/** What it does afterwards. */
	| 'after'
	/** A part of the body or the device. */
	| 'body'
	/** Something solid: a post, a floor, a wall. */
	| 'thing'
	| 'ground'
	| 'miss'
	| 'target'
	/** A line that is not there in the room: an arm's circle, targets of a kind. */
	| 'guide'
	| 'caution';

export type SceneShape =
	| { kind: 'line'; points: readonly Point[]; look: SceneLook; isArrow?: boolean }
	| { kind: 'circle'; at: Point; radius: number; look: SceneLook }
	| { kind: 'area'; points: readonly Point[]; look: SceneLook }
	| { kind: 'dot'; at: Point; look: SceneLook; radiusPx: number }
	| {
			kind: 'text';
			at: Point;
			text: string;
			look: SceneLook;
			anchor?: 'start' | 'middle' | 'end';
			offsetPx?: Point;
	  };

/** The target, where it can be taken hold of: the constants that each direction moves. */
export interface SceneTarget {
	readonly at: Point;
	/** Keys of number fields of the task's draft. */
	readonly keys: { readonly x?: string; readonly y?: string };
	/** Where the picture's x is not the constant itself: the constant at a place. */
	readonly readX?: (x: number) => number;
	/** Beside it: "(0.30, 1.10) m". */
	readonly detail: string;
	/** Half width of the band of hits around it in the picture's units, where it can be drawn. */
	readonly tolerance: number | null;
	readonly shape: 'point' | 'upright' | 'level';
	/** Where its words stand; beside it when nothing is said. */
	readonly words?: 'above';
}

/** A closer look at the miss. */
export interface SceneLens {
	readonly center: Point;
	/** Half width shown, in the picture's units. */
	readonly reach: number;
	/** Where the ball, fingertip or puck is at the moment that counts. */
	readonly at: Point;
	readonly tolerance: number;
	readonly shapes: readonly SceneShape[];
	readonly words: string;
}

/** What a trial looks like in the room. All places in one unit; y runs upwards. */
export interface Scene {
	readonly bounds: { readonly x: readonly [number, number]; readonly y: readonly [number, number] };
	/** Whether both directions are drawn to one scale. */
	readonly isToScale: boolean;
	readonly shapes: readonly SceneShape[];
	readonly target: SceneTarget | null;
	readonly lens: SceneLens | null;
	/** A length to compare with; null where the picture is not to scale. */
	readonly ruler: { readonly length: number; readonly text: string } | null;
	readonly caption: string;
}

export const line = (points: readonly Point[], look: SceneLook, isArrow = false): SceneShape => ({
	kind: 'line',
	points,
	look,
	isArrow
});

export const dot = (at: Point, look: SceneLook, radiusPx = 5): SceneShape => ({
	...{ kind: 'dot', at, look, radiusPx }
});

export const text = (
	at: Point,
	words: string,
	look: SceneLook,
	more: { anchor?: 'start' | 'middle' | 'end'; offsetPx?: Point } = {}
): SceneShape => ({ kind: 'text', at, text: words, look, ...more });

/** A rectangle by two corners. */
export const box = ([x0, y0]: Point, [x1, y1]: Point, look: SceneLook): SceneShape => ({
	kind: 'area',
	points: [
		[x0, y0],
		[x1, y0],
		[x1, y1],
		[x0, y1]
	],
	look
});
