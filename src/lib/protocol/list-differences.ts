import { describeProtocol } from './describe-protocol';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { canonicalText } from './canonical-text';

export type Difference = {
	/** Part and line, such as 'Visits, Day 3'. */
	place: string;
	/** Null where the line is new. */
	before: string | null;
	/** Null where the line is gone. */
	after: string | null;
};

/** What changed from one version to another, in the words of the readable protocol. */
export function listDifferences(
	before: ProtocolContent,
	after: ProtocolContent,
	{ withRule }: { withRule: boolean }
): Difference[] {
	const [old, fresh] = [before, after].map((content) => readLines(content, withRule));
	if (!old || !fresh) return [];
	const keys = [...new Set([...fresh.keys(), ...old.keys()])];
	const told = keys.flatMap((key): Difference[] => {
		const [was, is] = [old.get(key), fresh.get(key)];
		if (was?.text === is?.text && was?.place === is?.place) return [];
		const place = is?.place ?? was?.place ?? key;
		return [{ place, before: was?.text ?? null, after: is?.text ?? null }];
	});
	return [...told, ...(withRule ? listPolicyDifferences(before, after) : [])];
}

function readLines(content: ProtocolContent, withRule: boolean) {
	const parts = describeProtocol(content, { withRule });
	return new Map(
		parts.flatMap((part) =>
			part.lines.map(({ key, term, text }) => [
				`${part.key}/${key}`,
				{ place: `${part.title}, ${term}`, text }
			])
		)
	);
}

const toldElsewhere = new Set(['aims', 'settle', 'blockTrials']);

/** Settings of the policy that no line of the readable protocol tells. */
function listPolicyDifferences(before: ProtocolContent, after: ProtocolContent): Difference[] {
	const names = new Set([...Object.keys(before.policy), ...Object.keys(after.policy)]);
	return [...names].sort().flatMap((name): Difference[] => {
		const [was, is] = [before, after].map(({ policy }) =>
			name in policy ? canonicalText(policy[name]) : null
		);
		if (was === is || toldElsewhere.has(name)) return [];
		return [{ place: `Policy, ${name}`, before: was ?? null, after: is ?? null }];
	});
}
