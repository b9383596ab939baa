import type { KeepTaskAnswer } from './keep-task';

/** Why a task was not kept, and what to do. */
export function explainRefusal(answer: Exclude<KeepTaskAnswer, { ok: true }>): string {
	switch (answer.reason) {
		case 'unreadable': {
			const [first] = answer.faults;
			return `${first?.place ?? 'The task'}: ${first?.text ?? 'it cannot be read.'} ${first?.remedy ?? ''}`.trim();
		}
		case 'name-taken':
			return 'The lab has a task of this name. Open it to keep a new version, or choose another name.';
		case 'stale':
			return `Version ${answer.newest} was kept meanwhile. Look at it first, then keep yours on top of it or under another name.`;
		case 'no-such-task':
			return 'The lab has no task of this name any more. Keep it under a new name.';
		case 'nothing-changed':
			return 'Nothing differs from the newest version.';
	}
}
