import { cell, entry, row } from '../linear-algebra/vector.ts';
import { testF, type FTest } from './one-way-anova.ts';
import { VARIANCE_MIN } from './t-tests.ts';

/** Complete measurements of one person. */
export type RepeatedMeasures = { group: number; values: readonly number[] };

/** A test within people: with the degrees of freedom as they are and shrunk. */
export type WithinTest = FTest & {
	greenhouseGeisser: FTest;
	huynhFeldt: FTest;
};

export type MixedAnovaResult =
	| {
			ok: true;
			/** Null with one group. */
			between: FTest | null;
			within: WithinTest;
			/** Null with one group. */
			interaction: WithinTest | null;
			/** Greenhouse and Geisser's estimate of epsilon, and Huynh and Feldt's (at most 1). */
			epsilon: { greenhouseGeisser: number; huynhFeldt: number };
			/** Mean of each group at each measurement. */
			means: number[][];
	  }
	| { ok: false; reason: 'too-few-people' | 'no-variance' };

/**
 * Analysis of variance with groups between people and measurements within them.
 *
 * Shapes: people with m values each in; tests out. Units: those of the values.
 * Method: orthonormal contrasts of the measurements; sums of squares of the person means and of the
 * contrasts; degrees of freedom within shrunk by epsilon. The main effect within compares unweighted
 * means of the groups (sums of squares of type III), so that unequal groups do not mix it with the
 * interaction.
 * Source: S. Greenhouse and S. Geisser, Psychometrika 24 (1959); H. Huynh and L. Feldt, J Educ Stat 1
 * (1976) with the correction of B. Lecoutre (1991).
 * Accuracy: relative 1e-10; tests/reference/analysis.test.ts.
 * @throws RangeError when people differ in their count of measurements, there are fewer than two, or
 * groups are not numbered from 0 without a gap
 */
export function analyseMixed(people: readonly RepeatedMeasures[]): MixedAnovaResult {
	const { groups, m } = sortPeople(people);
	const [n, k] = [people.length, groups.length];
	if (n - k < 2 || groups.some((group) => group.length === 0))
		return { ok: false, reason: 'too-few-people' };
	const contrasts = buildContrasts(m);
	const scores = groups.map((group) => group.map((values) => project(contrasts, values)));
	const means = scores.map(averageRows);
	const error = sumError(scores, means, m - 1);
	const total = error.reduce((sum, _, i) => sum + cell(error, i, i), 0);
	const between = k > 1 ? testBetween(groups, m) : null;
	if (!(total > VARIANCE_MIN) || between === 'no-variance')
		return { ok: false, reason: 'no-variance' };
	const epsilon = estimateEpsilon(error, { n, k, m });
	const finish = (square: number, df: number): WithinTest => {
		const f = square / df / (total / ((n - k) * (m - 1)));
		const shrink = (e: number) => testF(f, e * df, e * (n - k) * (m - 1));
		return {
			...shrink(1),
			greenhouseGeisser: shrink(epsilon.greenhouseGeisser),
			huynhFeldt: shrink(epsilon.huynhFeldt)
		};
	};
	const sizes = groups.map((group) => group.length);
	return {
		ok: true,
		between,
		within: finish(sumWithin(means, sizes), m - 1),
		interaction: k > 1 ? finish(sumInteraction(means, sizes), (k - 1) * (m - 1)) : null,
		epsilon,
		means: groups.map(averageRows)
	};
}

function sortPeople(people: readonly RepeatedMeasures[]) {
	const m = people[0]?.values.length ?? 0;
	if (m < 2) throw new RangeError('people need at least two measurements');
	const groups: number[][][] = [];
	people.forEach(({ group, values }, i) => {
		if (values.length !== m)
			throw new RangeError(`person ${i + 1} has ${values.length} measurements, the first has ${m}`);
		if (!values.every(Number.isFinite)) throw new RangeError(`person ${i + 1}: not a number`);
		if (!Number.isInteger(group) || group < 0 || group >= people.length)
			throw new RangeError(`person ${i + 1} is in group ${group}`);
		while (groups.length <= group) groups.push([]);
		groups[group]?.push([...values]);
	});
	return { groups, m };
}

/** Rows: m - 1 orthonormal contrasts of m measurements (Helmert). */
function buildContrasts(m: number): number[][] {
	return Array.from({ length: m - 1 }, (_, i) => {
		const size = Math.sqrt((i + 1) * (i + 2));
		return Array.from({ length: m }, (__, j) => {
			if (j <= i) return 1 / size;
			return j === i + 1 ? -(i + 1) / size : 0;
		});
	});
}

function project(contrasts: readonly number[][], values: readonly number[]): number[] {
	return contrasts.map((c) => c.reduce((sum, weight, j) => sum + weight * entry(values, j), 0));
}

function averageRows(rows: readonly (readonly number[])[]): number[] {
	return row(rows, 0).map((_, j) => rows.reduce((sum, r) => sum + entry(r, j), 0) / rows.length);
}

/** Sums of squares and products of the contrasts about their group means. */
function sumError(
	scores: readonly (readonly number[][])[],
	means: readonly number[][],
	size: number
): number[][] {
	const E = Array.from({ length: size }, () => new Array<number>(size).fill(0));
	scores.forEach((group, g) => {
		for (const person of group) {
			const rest = person.map((value, i) => value - cell(means, g, i));
			E.forEach((target, i) =>
				target.forEach((value, j) => (target[j] = value + entry(rest, i) * entry(rest, j)))
			);
		}
	});
	return E;
}

function testBetween(groups: readonly number[][][], m: number): FTest | 'no-variance' {
	const averages = groups.map((group) =>
		group.map((values) => values.reduce((sum, value) => sum + value, 0) / m)
	);
	const means = averages.map((list) => list.reduce((sum, value) => sum + value, 0) / list.length);
	const n = averages.reduce((sum, list) => sum + list.length, 0);
	const k = groups.length;
	const mean = averages.flat().reduce((sum, value) => sum + value, 0) / n;
	const above = averages.reduce(
		(sum, list, g) => sum + list.length * (entry(means, g) - mean) ** 2,
		0
	);
	const inside = averages.reduce(
		(sum, list, g) => sum + list.reduce((s, value) => s + (value - entry(means, g)) ** 2, 0),
		0
	);
	if (!(inside > Math.max(VARIANCE_MIN, 1e-26 * above))) return 'no-variance';
	return testF(above / (k - 1) / (inside / (n - k)), k - 1, n - k);
}

/** Of the unweighted mean of the groups. */
function sumWithin(means: readonly number[][], sizes: readonly number[]): number {
	const k = means.length;
	const middle = averageRows(means);
	const size = (k * k) / sizes.reduce((sum, n) => sum + 1 / n, 0);
	return size * middle.reduce((sum, value) => sum + value * value, 0);
}

function sumInteraction(means: readonly number[][], sizes: readonly number[]): number {
	const n = sizes.reduce((sum, size) => sum + size, 0);
	const middle = row(means, 0).map(
		(_, i) => means.reduce((sum, mean, g) => sum + entry(sizes, g) * entry(mean, i), 0) / n
	);
	return means.reduce(
		(sum, mean, g) =>
			sum + entry(sizes, g) * mean.reduce((s, value, i) => s + (value - entry(middle, i)) ** 2, 0),
		0
	);
}

function estimateEpsilon(E: readonly number[][], { n, k, m }: { n: number; k: number; m: number }) {
	const d = m - 1;
	const trace = E.reduce((sum, _, i) => sum + cell(E, i, i), 0);
	const square = E.flat().reduce((sum, value) => sum + (value / trace) ** 2, 0);
	const greenhouseGeisser = Math.min(1, 1 / (d * square));
	const df = n - k;
	const huynhFeldt = Math.min(
		1,
		((df + 1) * d * greenhouseGeisser - 2) / (d * (df - d * greenhouseGeisser))
	);
	return {
		greenhouseGeisser,
		huynhFeldt: huynhFeldt > greenhouseGeisser ? huynhFeldt : greenhouseGeisser
	};
}
