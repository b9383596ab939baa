import type { JobRunner } from './run-jobs';

/** What a worker answers to a job. */
export type WorkerAnswer<Result> = { ok: true; result: Result } | { ok: false; message: string };

/** A worker of the browser that answers each job with one message. */
export function openWorker<Job, Result>(worker: Worker): JobRunner<Job, Result> {
	return {
		run: (job) =>
			new Promise((resolve, reject) => {
				worker.onmessage = ({ data }: MessageEvent<WorkerAnswer<Result>>) =>
					data.ok ? resolve(data.result) : reject(new Error(data.message));
				worker.onerror = (event) => reject(new Error(event.message || 'The worker stopped.'));
				worker.postMessage(job);
			}),
		stop: () => worker.terminate()
	};
}
