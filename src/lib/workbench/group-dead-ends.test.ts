import { expect, it } from 'vitest';
import { groupDeadEnds } from './group-dead-ends';

const end = (person: string, visit: number | null) => ({
	...{
		code: 'no-chain' as const,
		person,
		arm: 'a',
		visit,
		text: `${person} waits`,
		remedy: 'Mend.'
	}
});

it('lists one dead end with everybody who ran into it, the most frequent first', () => {
	const groups = groupDeadEnds([end('D03', 2), end('D02', 5), end('D01', 5), end('D02', 5)]);
	expect(groups.map(({ visit, people }) => [visit, people])).toEqual([
		[5, ['D01', 'D02']],
		[2, ['D03']]
	]);
});
