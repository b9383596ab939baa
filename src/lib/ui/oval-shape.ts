/**
 * How a participant's oval is drawn. Blinded roles are only ever given `plain`.
 * `fill` runs from 0 (lies across the manifold) to 1 (lies along it).
 */
export type OvalShape =
	| { kind: 'plain'; filled?: boolean }
	| { kind: 'ellipse'; ratio: number; angleDeg: number; fill: number }
	| { kind: 'hatched'; ratio?: number; angleDeg?: number }
	| { kind: 'dashed'; ratio?: number; angleDeg?: number }
	| { kind: 'shift' }
	| { kind: 'washout' }
	| { kind: 'probe' }
	| { kind: 'recovery' }
	| { kind: 'kept' };

/** Below this ratio of long to short axis an oval has no direction. */
export const noLongAxisBelow = 1.3;

export interface OvalAxes {
	rx: number;
	ry: number;
	angleDeg: number;
	hasDirection: boolean;
}

/** Half axes inside a 28 x 18 frame, turned counter-clockwise, keeping the oval inside the frame. */
export function ovalAxes(shape: OvalShape): OvalAxes {
	const given = 'ratio' in shape ? shape.ratio : undefined;
	if (given === undefined) return { rx: 9.5, ry: 5.6, angleDeg: tilt(shape), hasDirection: false };
	if (!(given >= noLongAxisBelow)) return { rx: 7, ry: 7, angleDeg: 0, hasDirection: false };
	const angleDeg = 'angleDeg' in shape ? (shape.angleDeg ?? 0) : 0;
	const ratio = Math.min(given, 4);
	const rx = Math.min(longest(angleDeg, ratio), 12);
	return { rx, ry: rx / ratio, angleDeg, hasDirection: true };
}

function tilt(shape: OvalShape): number {
	return shape.kind === 'plain' ? 18 : 0;
}

/** The longest half axis whose turned oval is still at most 8 high and 13 wide (half sizes). */
function longest(angleDeg: number, ratio: number): number {
	const angle = (angleDeg * Math.PI) / 180;
	const high = Math.hypot(Math.sin(angle), Math.cos(angle) / ratio);
	const wide = Math.hypot(Math.cos(angle), Math.sin(angle) / ratio);
	return Math.min(8 / high, 13 / wide);
}
