import { describe, expect, it } from 'vitest';
import {
	computeEllipseAxes,
	ellipseOutline,
	ellipsePath,
	projectEllipsoid,
	toPixelEllipse,
	type PlaneEllipse
} from './ellipse-path';

const x = (value: number) => 50 + 200 * value;
const y = (value: number) => 300 - 40 * value;
const backX = (px: number) => (px - 50) / 200;
const backY = (px: number) => (300 - px) / 40;

function quadraticForm({ center, shape }: PlaneEllipse, px: number, py: number): number {
	const [[a, b], [, d]] = shape;
	const [u, v] = [px - center[0], py - center[1]];
	return (d * u * u - 2 * b * u * v + a * v * v) / (a * d - b * b);
}

describe('computeEllipseAxes', () => {
	it('finds half axes and direction of a turned ellipse', () => {
		// Half axes 3 and 1 turned by 30 degrees: shape = R diag(9, 1) Rᵀ.
		const axes = computeEllipseAxes([
			[7, 2 * Math.sqrt(3)],
			[2 * Math.sqrt(3), 3]
		]);
		expect(axes.long).toBeCloseTo(3, 12);
		expect(axes.short).toBeCloseTo(1, 12);
		expect((axes.angleRad * 180) / Math.PI).toBeCloseTo(30, 12);
	});

	it('keeps a very thin ellipse thin', () => {
		const axes = computeEllipseAxes([
			[1, 1 - 1e-12],
			[1 - 1e-12, 1]
		]);
		// det = 2e-12 − 1e-24, larger eigenvalue 2 − 1e-12.
		expect(axes.short).toBeCloseTo(1e-6, 9);
	});

	it.each([
		[1, 2, 1],
		[-1, 0, 1],
		[Number.NaN, 0, 1],
		[0, 0, 0]
	])('refuses a matrix that is no ellipse: %s %s %s', (a, b, d) => {
		expect(() =>
			computeEllipseAxes([
				[a, b],
				[b, d]
			])
		).toThrow(RangeError);
	});
});

describe('toPixelEllipse', () => {
	const ellipse: PlaneEllipse = {
		center: [0.4, 2],
		shape: [
			[0.05, 0.12],
			[0.12, 0.9]
		]
	};

	it('draws only points of the ellipse, though the two scales differ', () => {
		for (const [px, py] of ellipseOutline(toPixelEllipse(ellipse, x, y))) {
			expect(quadraticForm(ellipse, backX(px), backY(py))).toBeCloseTo(1, 9);
		}
	});

	it('gives a path from one end of the long axis over the other and back', () => {
		const { cx, cy, rx, ry, angleDeg } = toPixelEllipse(ellipse, x, y);
		const path = ellipsePath({ cx, cy, rx, ry, angleDeg });
		const numbers = path.match(/-?\d+(\.\d+)?/g)?.map(Number) ?? [];
		const [startX = 0, startY = 0] = numbers;
		expect(quadraticForm(ellipse, backX(startX), backY(startY))).toBeCloseTo(1, 2);
		expect(path).toMatch(/^M.+A.+A.+Z$/);
	});
});

describe('projectEllipsoid', () => {
	const ellipsoid = {
		center: [1, 2, 3],
		shape: [
			[4, 0, 1],
			[0, 9, 0],
			[1, 0, 1]
		]
	};

	it('takes the block of the two variables', () => {
		expect(projectEllipsoid(ellipsoid, 0, 2)).toEqual({
			center: [1, 3],
			shape: [
				[4, 1],
				[1, 1]
			]
		});
	});

	it('refuses a variable that is not there', () => {
		expect(() => projectEllipsoid(ellipsoid, 0, 3)).toThrow(RangeError);
	});
});
