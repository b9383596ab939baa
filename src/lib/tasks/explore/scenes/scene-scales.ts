import { scaleLinear, type ScaleLinear } from 'd3-scale';
import type { Point } from '$lib/charts/cloud-data';
import type { Scene } from './scene';

export interface SceneScales {
	readonly x: ScaleLinear<number, number>;
	readonly y: ScaleLinear<number, number>;
	readonly width: number;
	readonly height: number;
	/** px of one unit along x. */
	readonly perUnit: number;
}

/** Fits a scene into a frame: to one scale and centered where it is drawn to scale. */
export function fitScene({ bounds, isToScale }: Scene, width: number, height: number): SceneScales {
	const spanX = bounds.x[1] - bounds.x[0];
	const spanY = bounds.y[1] - bounds.y[0];
	const perX = width / spanX;
	const perY = height / spanY;
	const scaleX = isToScale ? Math.min(perX, perY) : perX;
	const scaleY = isToScale ? scaleX : perY;
	const left = (width - spanX * scaleX) / 2;
	const top = (height - spanY * scaleY) / 2;
	return {
		x: scaleLinear([...bounds.x], [left, left + spanX * scaleX]),
		y: scaleLinear([...bounds.y], [top + spanY * scaleY, top]),
		...{ width, height, perUnit: scaleX }
	};
}

/** A polyline of places as a path. */
export function scenePath(points: readonly Point[], { x, y }: SceneScales): string {
	return points
		.map(([a, b], k) => `${k === 0 ? 'M' : 'L'}${x(a).toFixed(1)} ${y(b).toFixed(1)}`)
		.join('');
}
