import { drawStyle, drawTraits } from '$scheduler/learners/draw-traits';
import { simulateBlock, startPerson } from '$scheduler/learners/simulated-person';
import { createSeededStream } from '$scheduler/random/seeded-stream';
import { createTask } from '$scheduler/tasks/create-task';
import { createScaledTask } from '$scheduler/tasks/scaled-task';
import { taskRecordSchema } from '$scheduler/tasks/task-record';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';

type Place = { code: string; visitNumber: number; blockNumber: number };

/** Simulated people who throw the same trials whatever block they were given, so whatever their arm. */
export function createThrower(content: ProtocolContent) {
	const record = taskRecordSchema.parse(content.task);
	const task = createScaledTask(createTask(record));
	const people = new Map<string, ReturnType<typeof start>>();
	const start = (code: string) => {
		const stream = createSeededStream(20_270_311, Number(code.replace(/\D/g, '')));
		const traits = drawTraits(stream, { style: drawStyle(stream), tolerance: record.tolerance });
		return { stream, traits, state: startPerson(traits) };
	};
	return {
		/** The next block of one person, as the file a rig would write. */
		throwBlock({ code, visitNumber, blockNumber }: Place): { name: string; bytes: Uint8Array } {
			const person = people.get(code) ?? start(code);
			const block = simulateBlock({ task, ...person, trialCount: 60 });
			people.set(code, { ...person, state: block.state });
			const names = record.variables.map(({ name }) => name);
			const lines = block.executions.map((trial, index) =>
				[code, visitNumber, blockNumber, index + 1, ...trial.map((x) => x.toFixed(4))].join(',')
			);
			const text = [['participant', 'visit', 'block', 'trial', ...names].join(','), ...lines];
			return {
				name: `${code}-visit-${visitNumber}-block-${blockNumber}.csv`,
				bytes: new TextEncoder().encode(`${text.join('\n')}\n`)
			};
		}
	};
}
