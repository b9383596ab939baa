import { describe, expect, it } from 'vitest';
import { readTableText } from '../../ui/table-text';
import { writeTableText } from '../../ui/write-table-text';
import { changeBlocks } from '../edit/blocks';
import { createPatternDraft } from '../patterns';
import { listBlockColumns } from './block-columns';
import { applyLists, checkBlockRows } from './check-block-rows';
import { listBlockRows } from './list-block-rows';

const draft = createPatternDraft('two-arms');
const columns = listBlockColumns(draft.task);
const context = { draft, columns };

function check(text: string) {
	const table = readTableText(text, columns, 2000);
	if (!table.ok) throw new Error(table.reason);
	return { table, ...checkBlockRows(table.rows, context) };
}
const faultsOf = (text: string) =>
	check(text).rows.flatMap(({ line, faults }) =>
		faults.map(({ column, suggestion }) => [line, column, suggestion])
	);

describe('blocks pasted from a spreadsheet', () => {
	it('name columns in any order, and write numbers with a comma', () => {
		const { lists, table } = check(
			'Trials\tDay\tKind\tcolour\tbreak\n40\tDay 1\tprobe\tred\t1,5\n60\tDay 1\tpenalized region\t\t\n'
		);
		expect(table.ok && table.ignoredColumns).toEqual(['colour']);
		expect(lists).toHaveLength(1);
		expect(lists?.[0]?.place).toEqual({ visit: 1, arm: null });
		expect(lists?.[0]?.blocks).toMatchObject([
			{ purpose: 'probe', trials: 40, restAfterMinutes: 1.5 },
			{ purpose: 'region', trials: 60, restAfterMinutes: null }
		]);
	});

	it('have every wrong cell of 200 rows marked by line and column, and change nothing until mended', () => {
		const wrong: Record<number, [string, string]> = {
			3: ['trials', 'sixty'],
			17: ['purpose', 'proobe'],
			18: ['trials', '60.5'],
			52: ['visit', 'Day 9'],
			99: ['arm', 'Fixd'],
			131: ['trials', '60 trials'],
			131.5: ['block', '0'],
			177: ['rest after', '-1'],
			200: ['purpose', '']
		};
		const head = ['visit', 'arm', 'block', 'purpose', 'trials', 'rest after'];
		const lines = Array.from({ length: 200 }, (_, index) => {
			const cells: Record<string, string> = {
				visit: `Day ${1 + Math.floor(index / 40)}`,
				arm: 'Fixed',
				block: String((index % 40) + 1),
				purpose: 'practice',
				trials: '60',
				'rest after': '1'
			};
			for (const [row, [column, text]] of Object.entries(wrong)) {
				if (Math.floor(Number(row)) === index + 1) cells[column] = text;
			}
			return head.map((name) => cells[name]).join('\t');
		});
		const text = [head.join('\t'), ...lines].join('\r\n');
		expect(check(text).rows).toHaveLength(200);
		expect(check(text).lists).toBeNull();
		// The head is line 1, so row 3 stands on line 4.
		expect(faultsOf(text)).toEqual([
			[4, 'trials', null],
			[18, 'purpose', 'probe'],
			[19, 'trials', '61'],
			[53, 'visit', 'Day 1'],
			[100, 'arm', 'Fixed'],
			[132, 'block', null],
			[132, 'trials', '60'],
			[178, 'restAfterMinutes', null],
			[201, 'purpose', null]
		]);
		const mended = lines.map((line) => line.replace(/sixty|60\.5|60 trials/, '60'));
		expect(check([head.join('\t'), ...mended].join('\n')).lists).toBeNull();
	});

	it('say when a visit has a block twice, or more than it may hold', () => {
		expect(faultsOf('visit\tblock\tpurpose\n1\t1\tbaseline\n1\t1\tbaseline')).toEqual([
			[3, 'block', null]
		]);
		const many = Array.from({ length: 41 }, () => '1\tbaseline\t5').join('\n');
		expect(faultsOf(`visit\tpurpose\ttrials\n${many}`)).toEqual([[42, 'visit', null]]);
	});

	it('are the same blocks again when copied out and pasted back', () => {
		const start = changeBlocks(draft, [{ visit: 2, arm: 'fixed', block: 0 }], {
			purpose: 'region',
			feedback: 'hidden',
			restAfterMinutes: 2.5,
			region: { center: [2.4, -0.1], halfWidth: [0.2, 0.05] }
		});
		const out = writeTableText(
			columns,
			listBlockRows(start).map(({ cells }) => ({
				...Object.fromEntries(columns.map(({ key }) => [key, ''])),
				...cells
			}))
		);
		const { lists } = check(out);
		expect(lists && applyLists(draft, lists)).toEqual(start);
	});
});
