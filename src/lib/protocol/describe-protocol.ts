import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { describeAnalysis } from './describe-analysis';
import { describeArms } from './describe-arms';
import { describeBooking, describeHours } from './describe-booking';
import { describeComparison } from './describe-comparison';
import { describeLimits } from './describe-limits';
import { describeAims, describeGuardRails } from './describe-rule';
import { describeTask } from './describe-task';
import { describeVisits } from './describe-visits';
import type { ProtocolLine, ProtocolPart, Reader } from './protocol-line';
import { isReadable } from './readable-leaves';
import { nameLeaf, readLeaves } from './read-leaves';

export type { ProtocolLine, ProtocolPart } from './protocol-line';

/**
 * A frozen version in plain words. A reader without the rule gets neither how blocks are chosen and
 * what is held, nor what single arms run.
 */
export function describeProtocol(content: ProtocolContent, reader: Reader): ProtocolPart[] {
	const rule = reader.withRule ? [describeAims(content), describeGuardRails(content)] : [];
	const parts: ProtocolPart[] = [
		{ key: 'task', title: 'Task', lines: describeTask(content.task) },
		{ key: 'arms', title: 'Arms', lines: describeArms(content, reader) },
		{ key: 'visits', title: 'Visits', lines: describeVisits(content, reader) },
		{ key: 'booking', title: 'Booking', lines: describeBooking(content) },
		...rule,
		{ key: 'hours', title: 'Hours', lines: describeHours(content) },
		{ key: 'comparison', title: 'Primary comparison', lines: describeComparison(content) },
		{ key: 'analysis', title: 'Outcomes and analysis', lines: describeAnalysis(content) },
		{ key: 'limits', title: 'Limits and consent', lines: describeLimits(content, reader) }
	];
	return [...parts, ...describeUntold(content, parts, reader)].filter(
		({ lines }) => lines.length > 0
	);
}

/** Told by nobody: the format, and a rule that says nothing. */
const plain = new Set(['format', 'policy']);

/** Values that no line above tells of, by their path: nothing of a version is left out. */
function describeUntold(
	content: ProtocolContent,
	parts: readonly ProtocolPart[],
	reader: Reader
): ProtocolPart[] {
	const told = new Set(parts.flatMap(({ lines }) => lines.flatMap(({ tells }) => tells)));
	const lines = [...readLeaves(content)]
		.filter(([path]) => !plain.has(path) && !told.has(path) && isReadable(path, reader))
		.map(([path, text]) => ({
			key: path,
			term: nameLeaf(path.replace(/^policy\./, '')),
			text,
			tells: [path]
		}));
	const ofRule = (line: ProtocolLine) => line.key.startsWith('policy.');
	return [
		{ key: 'settings', title: 'Every other setting of the rule', lines: lines.filter(ofRule) },
		{ key: 'further', title: 'Further', lines: lines.filter((line) => !ofRule(line)) }
	];
}
