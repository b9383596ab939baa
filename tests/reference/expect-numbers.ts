import { expect } from 'vitest';

/** Expects numbers, at any depth of lists, within an absolute or a relative tolerance. */
export function expectNumbers(
	got: unknown,
	wanted: unknown,
	{ abs = 0, rel = 0 }: { abs?: number | undefined; rel?: number | undefined }
): void {
	const [a, b] = [flatten(got), flatten(wanted)];
	expect(a).toHaveLength(b.length);
	a.forEach((value, i) => {
		const target = b[i] ?? Number.NaN;
		const allowed = Math.max(abs, rel * Math.max(Math.abs(target), 1e-12));
		expect(Math.abs(value - target), `${value} against ${target}`).toBeLessThanOrEqual(allowed);
	});
}

function flatten(value: unknown): number[] {
	return Array.isArray(value) ? value.flatMap(flatten) : [Number(value)];
}
