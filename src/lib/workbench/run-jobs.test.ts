import { describe, expect, it } from 'vitest';
import { runJobs } from './run-jobs';

function run(count: number, jobs: number[], signal = new AbortController().signal) {
	const results: number[] = [];
	let [opened, stopped] = [0, 0];
	const done = runJobs<number, number>({
		...{ jobs, count, signal, onResult: (result) => results.push(result) },
		open: () => {
			opened += 1;
			return {
				run: (job) => new Promise((resolve) => setTimeout(() => resolve(job * 10), job % 3)),
				stop: () => (stopped += 1)
			};
		}
	});
	return done.then(() => ({ results, opened, stopped }));
}

describe('runJobs', () => {
	it.each([1, 2, 5])('does every job once with %i workers and stops them', async (count) => {
		const { results, opened, stopped } = await run(count, [1, 2, 3, 4, 5, 6]);
		expect(results.toSorted((a, b) => a - b)).toEqual([10, 20, 30, 40, 50, 60]);
		expect([opened, stopped]).toEqual([count, count]);
	});

	it('opens no more workers than there are jobs', async () => {
		expect((await run(8, [1])).opened).toBe(1);
	});

	it('takes no further result once it is called off', async () => {
		const off = new AbortController();
		off.abort();
		expect((await run(2, [1, 2, 3], off.signal)).results).toEqual([]);
	});

	it('passes a failure on', async () => {
		const failing = runJobs({
			...{ jobs: [1], count: 1, signal: new AbortController().signal, onResult: () => undefined },
			open: () => ({ run: () => Promise.reject(new Error('broken')), stop: () => undefined })
		});
		await expect(failing).rejects.toThrow('broken');
	});
});
