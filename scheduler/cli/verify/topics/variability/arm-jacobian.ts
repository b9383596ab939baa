/** Derivative of the endpoint of a planar arm (x, then y) by its joint angles, each from the link before. */
export function computeArmJacobian(
	lengths: readonly number[],
	angles: readonly number[]
): number[][] {
	let direction = 0;
	const ends = angles.map((angle, i) => {
		direction += angle;
		const length = lengths[i] ?? 0;
		return { x: length * Math.cos(direction), y: length * Math.sin(direction) };
	});
	const sumFrom = (joint: number, part: 'x' | 'y') =>
		ends.slice(joint).reduce((sum, end) => sum + end[part], 0);
	return [
		angles.map((_, joint) => -sumFrom(joint, 'y')),
		angles.map((_, joint) => sumFrom(joint, 'x'))
	];
}
