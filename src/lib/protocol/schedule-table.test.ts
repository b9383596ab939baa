import { describe, expect, it } from 'vitest';
import { createFullContent, createPatternContent } from '../../../tests/support/full-protocol';
import { buildScheduleTable, type ScheduleTable } from './schedule-table';

/** The whole table as lines of text, one for the timepoints, one for the windows, one a row. */
function write({ columns, groups }: ScheduleTable): string[] {
	const line = (first: string, cells: readonly string[]) =>
		[first, ...cells.map((cell) => cell || '.')].join(' | ');
	return [
		line(
			'',
			columns.map(({ timepoint }) => timepoint)
		),
		line(
			'',
			columns.map(({ label }) => label)
		),
		line(
			'',
			columns.map(({ window }) => window)
		),
		...groups.flatMap(({ title, rows }) => [
			title,
			...rows.map(({ label, marks }) => line(label, marks))
		])
	];
}

describe('the schedule of assessments', () => {
	it('is the table made by hand for two arms over eight visits', () => {
		// Made by hand from the pattern's text: baseline, six practice days, retention a week later.
		expect(write(buildScheduleTable(createPatternContent(), { withRule: true }))).toEqual([
			' | −t2 | −t1 | 0 | t1 | t2 | t3 | t4 | t5 | t6 | t7',
			' | Enrolment | Baseline | Allocation | Day 1 | Day 2 | Day 3 | Day 4 | Day 5 | Day 6 | Retention',
			' | before any visit | first visit | once baseline data pass | +72 h (48–336) | +24 h (20–28) | +24 h (20–28) | +24 h (20–28) | +24 h (20–28) | +24 h (20–28) | +168 h (144–192)',
			'Enrolment',
			'Eligibility screen | × | . | . | . | . | . | . | . | . | .',
			'Informed consent, text 1 | × | . | . | . | . | . | . | . | . | .',
			'Allocation | . | . | × | . | . | . | . | . | . | .',
			'Interventions',
			'Adaptive | . | . | . | × | × | × | × | × | × | .',
			'Fixed | . | . | . | × | × | × | × | × | × | .',
			'Assessments',
			'Baseline block | . | × | . | . | . | . | . | . | . | .',
			'Retention block | . | . | . | . | . | . | . | . | . | ×',
			'Mean absolute error at retention (primary) | . | . | . | . | . | . | . | . | . | ×',
			'Result of every trial | . | × | . | × | × | × | × | × | × | ×',
			'Pain, fatigue, adverse events | . | × | . | × | × | × | × | × | × | ×'
		]);
	});

	it('has no allocation where there is one arm', () => {
		const [arm] = createPatternContent().arms;
		const content = { ...createPatternContent(), arms: arm ? [arm] : [], comparison: null };
		const { columns, groups } = buildScheduleTable(content, { withRule: true });
		expect(columns.map(({ timepoint }) => timepoint).slice(0, 3)).toEqual(['−t1', 't1', 't2']);
		expect(groups[0]?.rows.map(({ key }) => key)).toEqual(['screen', 'consent']);
	});

	it('allocates within the first visit where no baseline visit comes before', () => {
		const content = createPatternContent();
		const visits = content.visits.slice(1);
		const { columns } = buildScheduleTable({ ...content, visits }, { withRule: true });
		expect(columns.slice(0, 3)).toMatchObject([
			{ key: 'enrolment', timepoint: '−t1' },
			{ key: 'allocation', window: 'within the first visit, after baseline' },
			{ key: 'visit-2', timepoint: 't1' }
		]);
	});

	it('tells what single arms run only to readers who may know it', () => {
		const rowsOf = (withRule: boolean) =>
			buildScheduleTable(createFullContent(), { withRule })
				.groups.flatMap(({ rows }) => rows)
				.map(({ key }) => key);
		expect(rowsOf(true)).toContain('block-transfer');
		expect(rowsOf(false)).not.toContain('block-transfer');
	});

	it('marks each outcome at its own visit', () => {
		const { columns, groups } = buildScheduleTable(createFullContent(), { withRule: true });
		const row = groups[2]?.rows.find(({ label }) => label === 'Covariation (secondary)');
		const at = row?.marks.flatMap((cell, index) => (cell ? [columns[index]?.label] : []));
		expect(at).toEqual(['Day 6']);
	});
});
