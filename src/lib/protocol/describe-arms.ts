import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { pathsIn, type ProtocolLine, type Reader } from './protocol-line';

const ruleWords: Record<string, string> = {
	adaptive: 'each block is chosen for the person from how they vary',
	fixed: 'every block is the protocol’s own, the same for all',
	yoked: 'each block of adaptive time repeats what a partner was given in'
};

/** What each arm gets, and how a yoked arm follows its master. */
export function describeArms(content: ProtocolContent, { withRule }: Reader): ProtocolLine[] {
	const { arms } = content;
	const nameOf = (key: string) => arms.find((arm) => arm.key === key)?.name ?? key;
	const lines = arms.map(({ key, name, rule, master }, index) => {
		const words = ruleWords[rule] ?? rule;
		return {
			key: `arm-${key}`,
			term: name,
			text: master ? `${words} ${nameOf(master)}` : words,
			tells: pathsIn(`arms.${index + 1}`, ['key', 'name', 'rule', ...(master ? ['master'] : [])])
		};
	});
	return withRule ? [...lines, ...describeYoking(content)] : lines;
}

function describeYoking({ yoking }: ProtocolContent): ProtocolLine[] {
	if (!yoking) return [];
	return [
		{
			key: 'yoking-lead',
			term: 'Behind the master',
			text: `each visit at least ${yoking.leadHours} h after the partner’s`,
			tells: ['yoking.leadHours']
		},
		{
			key: 'yoking-orphan',
			term: 'If the master withdraws',
			text: yoking.orphan.replaceAll('-', ' '),
			tells: ['yoking.orphan']
		},
		{
			key: 'yoking-late',
			term: 'If the master is late',
			text: yoking.late.replaceAll('-', ' '),
			tells: ['yoking.late']
		}
	];
}
