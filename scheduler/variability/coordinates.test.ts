import { describe, expect, it } from 'vitest';
import {
	createLinearSystem,
	createSquareSystem,
	createVelocitySystem,
	type CoordinateSystem
} from './coordinates.ts';

const quarter = Math.PI / 2;
const radPerUnit = Math.PI / 180;
const systems: [string, CoordinateSystem, number[]][] = [
	[
		'sum and difference',
		createLinearSystem({
			name: 's',
			weights: [
				[1, 1],
				[1, -1]
			]
		}),
		[5, 3]
	],
	[
		'limb angles',
		createLinearSystem({
			name: 'l',
			weights: [
				[1, 0, 0],
				[1, 1, 0],
				[1, 1, 1]
			]
		}),
		[45, 60, 20]
	],
	['way of a slide', createSquareSystem({ name: 'w', axis: 0, factor: 0.283 }), [2.4, 0.3]],
	[
		'turned velocity',
		createVelocitySystem({ angleAxis: 0, speedAxis: 1, radPerUnit, turnRad: quarter }),
		[-60, 2.5]
	]
];

describe.each(systems)('%s', (_, system, x) => {
	it('comes back to the units', () => {
		const z = system.toCoordinates(x);
		expect(z).not.toBeNull();
		system.toUnits(z ?? []).forEach((value, i) => expect(value).toBeCloseTo(x[i] ?? NaN, 9));
	});

	it('has the derivative of its way back', () => {
		const z = system.toCoordinates(x) ?? [];
		const slopes = system.derivative(z);
		const h = 1e-6;
		z.forEach((_value, j) => {
			const at = (sign: number) =>
				system.toUnits(z.map((value, k) => (k === j ? value + sign * h : value)));
			at(1).forEach((up, i) => {
				const down = at(-1)[i] ?? NaN;
				expect((up - down) / (2 * h)).toBeCloseTo(slopes[i]?.[j] ?? NaN, 5);
			});
		});
	});
});

describe('coordinates', () => {
	it('write a ball on an arm at the right, swung counter-clockwise, as moving upwards', () => {
		const system = createVelocitySystem({
			angleAxis: 0,
			speedAxis: 1,
			radPerUnit,
			turnRad: quarter
		});
		const [sideways, upward] = system.toCoordinates([0, 3]) ?? [];
		expect(sideways).toBeCloseTo(0, 12);
		expect(upward).toBeCloseTo(3, 12);
	});

	it('refuse weights that cannot be undone', () => {
		expect(() =>
			createLinearSystem({
				name: '',
				weights: [
					[1, 1],
					[2, 2]
				]
			})
		).toThrow(RangeError);
	});

	it('cannot write the square of what is not positive', () => {
		const system = createSquareSystem({ name: 'w', axis: 0, factor: 1 });
		expect(system.toCoordinates([-1, 0])).toBeNull();
	});
});
