import type { DryRunReport, DryRunRequest } from '$scheduler/design/dry-run/dry-settings';
import { walkDry, type DryProgress } from '$scheduler/design/dry-run/run-dry';

export type DryMessage =
	| { kind: 'progress'; progress: DryProgress }
	| { kind: 'report'; report: DryRunReport }
	| { kind: 'failed'; message: string };

const say = (message: DryMessage) => postMessage(message);

onmessage = ({ data }: MessageEvent<DryRunRequest>) => {
	try {
		const walk = walkDry(data);
		for (;;) {
			const next = walk.next();
			if (next.done) return say({ kind: 'report', report: next.value });
			say({ kind: 'progress', progress: next.value });
		}
	} catch (error) {
		say({ kind: 'failed', message: error instanceof Error ? error.message : String(error) });
	}
};
