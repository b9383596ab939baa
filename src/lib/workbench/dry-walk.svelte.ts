import type { DryRunReport, DryRunRequest } from '$scheduler/design/dry-run/dry-settings';
import type { DryProgress } from '$scheduler/design/dry-run/run-dry';
import type { DryMessage } from './dry-worker';

/** A dry run in a worker of its own: how far it is, what it found, and how to call it off. */
export class DryWalk {
	progress = $state.raw<DryProgress | null>(null);
	report = $state.raw<DryRunReport | null>(null);
	isRunning = $state(false);
	failure = $state('');
	#worker: Worker | null = null;

	start(request: DryRunRequest): void {
		this.stop();
		this.failure = '';
		this.report = null;
		this.progress = { done: 0, people: request.settings.people };
		this.isRunning = true;
		const worker = new Worker(new URL('./dry-worker.ts', import.meta.url), { type: 'module' });
		this.#worker = worker;
		worker.onmessage = ({ data }: MessageEvent<DryMessage>) => this.#take(data);
		worker.onerror = (event) => this.#fail(event.message || 'the worker stopped');
		worker.postMessage(request);
	}

	stop(): void {
		this.#worker?.terminate();
		this.#worker = null;
		this.isRunning = false;
	}

	#take(message: DryMessage): void {
		if (message.kind === 'progress') this.progress = message.progress;
		else if (message.kind === 'failed') this.#fail(message.message);
		else {
			this.report = message.report;
			this.stop();
		}
	}

	#fail(message: string): void {
		this.failure = message;
		this.stop();
	}
}
