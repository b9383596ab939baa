/** One of several workers: takes a job, answers once. */
export interface JobRunner<Job, Result> {
	run(job: Job): Promise<Result>;
	stop(): void;
}

type Options<Job, Result> = {
	jobs: readonly Job[];
	open: () => JobRunner<Job, Result>;
	/** How many run side by side. */
	count: number;
	onResult: (result: Result) => void;
	signal: AbortSignal;
};

/**
 * Lets several workers share a list of jobs; whoever is free takes the next. Ends when all are done, when
 * it is called off (workers are stopped in the middle of a job), or with the first failure.
 */
export async function runJobs<Job, Result>(options: Options<Job, Result>): Promise<void> {
	const { jobs, open, count, onResult, signal } = options;
	const queue = [...jobs];
	const runners = Array.from({ length: Math.min(count, queue.length) }, open);
	const stopAll = () => runners.forEach((runner) => runner.stop());
	const stopped = new Promise<void>((resolve) => {
		if (signal.aborted) resolve();
		signal.addEventListener('abort', () => resolve(), { once: true });
	});
	const work = async (runner: JobRunner<Job, Result>) => {
		for (let job = queue.shift(); job !== undefined && !signal.aborted; job = queue.shift()) {
			const result = await runner.run(job);
			if (!signal.aborted) onResult(result);
		}
	};
	try {
		await Promise.race([Promise.all(runners.map(work)), stopped]);
	} finally {
		stopAll();
	}
}
