import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { computeCloudAlignment } from './cloud-alignment.ts';
import { compareCoordinates } from './compare-coordinates.ts';
import {
	convertExecutions,
	convertJacobian,
	createLogSystem,
	createScaledSystem,
	createVelocitySystem
} from './coordinates.ts';
import { computeCovariance } from './moments.ts';
import { anyTrials, tiltedTrials } from '../../tests/support/variability/any-trials.ts';
import { computeManifoldVariance } from './uncontrolled-manifold.ts';

const trials = tiltedTrials(30);
const sumOfBoth = [[1, 1]];

describe('computeManifoldVariance', () => {
	it('along and across add up to all variance, and the index on its open scale is half the log ratio', () => {
		const value = fc.integer({ min: -9, max: 9 });
		fc.assert(
			fc.property(anyTrials(3), fc.tuple(value, value, value), (executions, slopes) => {
				fc.pre(slopes.some((slope) => slope !== 0));
				const found = computeManifoldVariance(executions, [slopes]);
				fc.pre(found.ok);
				if (!found.ok) return;
				const { along, across, total, index, indexZ } = found;
				expect((2 * along + across) / 3).toBeCloseTo(total, 9);
				fc.pre(found.logRatio < 20 && found.logRatio > -20);
				const [d, r] = [3, 1];
				expect(0.5 * Math.log((d / r + index) / (d / (d - r) - index))).toBeCloseTo(indexZ, 4);
			})
		);
	});

	it('says which part is missing', () => {
		const [compensating, common] = [
			trials.map(([x = 0]) => [x, -x]),
			trials.map(([x = 0]) => [x, x])
		];
		expect(computeManifoldVariance(compensating, sumOfBoth)).toEqual({
			...{ ok: false, reason: 'no-spread-across' }
		});
		expect(computeManifoldVariance(common, sumOfBoth).ok).toBe(false);
		const J = [
			[1, 1, 0],
			[2, 2, 0]
		];
		expect(
			computeManifoldVariance(
				[
					[0, 1, 2],
					[1, 3, 1]
				],
				J
			)
		).toEqual({
			...{ ok: false, reason: 'rank-deficient-jacobian' }
		});
		expect(() =>
			computeManifoldVariance(trials, [
				[1, 0],
				[0, 1]
			])
		).toThrow(RangeError);
	});
});

describe('computeCloudAlignment', () => {
	it('turns with the cloud', () => {
		fc.assert(
			fc.property(fc.double({ min: -80, max: 80, noNaN: true }), (degrees) => {
				const angle = (degrees * Math.PI) / 180;
				const [c, s] = [Math.cos(angle), Math.sin(angle)];
				const long = Array.from({ length: 21 }, (_, i) => i - 10).map((x) => [x, x % 2]);
				const turned = long.map(([x = 0, y = 0]) => [c * x - s * y, s * x + c * y]);
				const [still, moved] = [long, turned].map((list) =>
					computeCloudAlignment(computeCovariance(list), [[1, 0]])
				);
				const wanted = Math.abs(degrees);
				expect(Math.abs((moved?.ok ? moved.angleDeg : NaN) - wanted)).toBeLessThan(
					1e-6 + (still?.ok ? still.angleDeg : 0)
				);
				expect(moved?.ok && moved.isMeaningful).toBe(true);
			})
		);
	});

	it('of a plane in three variables is the angle to the plane', () => {
		const covariance = [
			[1, 0, 0],
			[0, 1, 0],
			[0, 0, 9]
		];
		const found = computeCloudAlignment(covariance, [
			[1, 0, 0],
			[0, 1, 1]
		]);
		expect(found.ok && found.angleDeg).toBeCloseTo(45, 10);
	});

	it('of a round cloud is said to mean nothing; of a flat one the ratio stays finite', () => {
		const round = computeCloudAlignment(
			[
				[1, 0],
				[0, 1.2]
			],
			[[1, 0]]
		);
		expect(round.ok && round.isMeaningful).toBe(false);
		const flat = computeCloudAlignment(
			[
				[1, 0],
				[0, 0]
			],
			[[1, 0]]
		);
		expect(flat.ok && Number.isFinite(flat.aspectRatio)).toBe(true);
		expect(
			computeCloudAlignment(
				[
					[0, 0],
					[0, 0]
				],
				[[1, 0]]
			).ok
		).toBe(false);
	});
});

describe('coordinate systems', () => {
	const systems = [
		createScaledSystem({ origin: [1, 2], scale: [0.5, 3] }),
		createLogSystem(),
		createVelocitySystem({ angleAxis: 0, speedAxis: 1, radPerUnit: Math.PI / 180 })
	];

	it.each(systems)('$name leads back, and its derivative is that of the way back', (system) => {
		const positive = fc.double({ min: 0.5, max: 90, noNaN: true });
		fc.assert(
			fc.property(positive, positive, (x, y) => {
				const z = system.toCoordinates([x, y]);
				if (!z) throw new Error('not writable');
				system.toUnits(z).forEach((value, i) => expect(value).toBeCloseTo([x, y][i] ?? NaN, 9));
				z.forEach((value, j) => {
					const step = 1e-5 * Math.max(1, Math.abs(value));
					const ends = [-step, step].map((by) =>
						system.toUnits(z.map((other, k) => (k === j ? other + by : other)))
					);
					system.derivative(z).forEach((row, i) => {
						const slope = ((ends[1]?.[i] ?? NaN) - (ends[0]?.[i] ?? NaN)) / (2 * step);
						expect(Math.abs((row[j] ?? NaN) - slope)).toBeLessThan(
							1e-4 * Math.max(1, Math.abs(slope))
						);
					});
				});
			})
		);
	});

	it('log and velocity do not write what they cannot', () => {
		expect(createLogSystem().toCoordinates([1, 0])).toBeNull();
		expect(systems[2]?.toCoordinates([10, 0])).toBeNull();
		expect(
			convertExecutions(
				[
					[1, 1],
					[-1, 1]
				],
				createLogSystem()
			)
		).toBeNull();
		expect(() => createScaledSystem({ origin: [0], scale: [0] })).toThrow(RangeError);
	});
});

describe('compareCoordinates', () => {
	const measure = (J: number[][]) =>
		compareCoordinates({
			blocks: [trials],
			first: createScaledSystem({ name: 'units', origin: [0, 0], scale: [1, 1] }),
			second: createScaledSystem({ name: 'tenfold', origin: [0, 0], scale: [1, 0.1] }),
			measure: ([executions = []], system) => {
				const found = computeManifoldVariance(
					executions,
					convertJacobian(J, system, executions[0] ?? [])
				);
				return found.ok ? { ok: true, value: found.logRatio } : found;
			}
		});

	it('puts both values, their ratio and a change of sign side by side', () => {
		const compared = measure(sumOfBoth);
		if (!compared.ok) throw new Error(compared.reason);
		expect(compared.first.system).toBe('units');
		expect(compared.ratio).toBeCloseTo(compared.second.value / compared.first.value, 12);
		expect(compared.hasSignFlip).toBe(compared.first.value * compared.second.value < 0);
		expect(compared.second.value).not.toBeCloseTo(compared.first.value, 2);
	});

	it('names the system in which there is no value', () => {
		const compared = compareCoordinates({
			blocks: [[[1, -1]]],
			first: createScaledSystem({ origin: [0, 0], scale: [1, 1] }),
			second: createLogSystem(),
			measure: () => ({ ok: true, value: 1 })
		});
		expect(compared).toEqual({ ok: false, reason: 'not-writable', system: 'log' });
	});
});
