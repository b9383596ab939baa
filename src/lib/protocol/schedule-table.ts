import type { BlockPurpose } from '$scheduler/protocol/block-plan';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { blocksOfArm, type VisitPlan } from '$scheduler/protocol/visit-plan';
import { purposeWords } from './purpose-words';

export type ScheduleColumn = {
	key: string;
	period: 'Enrolment' | 'Allocation' | 'Before allocation' | 'After allocation';
	/** As in schedules of assessments: 0 is allocation, −t before it, t after it. */
	timepoint: string;
	label: string;
	/** When, with its window. */
	window: string;
};
export type ScheduleRow = { key: string; label: string; marks: string[] };
export type ScheduleGroup = { title: string; rows: ScheduleRow[] };
export type ScheduleTable = { columns: ScheduleColumn[]; groups: ScheduleGroup[] };

const mark = '×';
const assessed: readonly BlockPurpose[] = ['baseline', 'probe', 'clamp', 'retention', 'transfer'];
const notIntervention = new Set<BlockPurpose>([...assessed, 'rest', 'washout']);

type Options = {
	/** Whether lists of single arms are told apart, as for readers who may know them. */
	withRule: boolean;
};

/**
 * The schedule of enrolment, interventions and assessments of a protocol.
 *
 * Shapes:  every row has one mark for each column, '×' or ''.
 * Method:  columns are enrolment, each visit with its window, and allocation after the last visit before
 *          it; rows stand in three groups. Everything is read from the one protocol.
 * Source:  figure of the SPIRIT 2013 statement, kept in SPIRIT 2025 (enrolment, interventions,
 *          assessments against timepoints). Accuracy: schedule-table.test.ts holds a table made by hand.
 * @example buildScheduleTable(content, { withRule: true }).columns.length
 */
export function buildScheduleTable(content: ProtocolContent, options: Options): ScheduleTable {
	const columns = buildColumns(content);
	return {
		columns,
		groups: [
			{ title: 'Enrolment', rows: enrolmentRows(content, columns) },
			{ title: 'Interventions', rows: interventionRows(content, columns, options) },
			{ title: 'Assessments', rows: assessmentRows(content, columns, options) }
		]
	};
}

/** Visits before allocation: the baseline visits at the beginning; with none the study begins allocated. */
function countBefore({ visits }: ProtocolContent): number {
	const index = visits.findIndex(({ kind }) => kind !== 'baseline');
	return index < 0 ? visits.length : index;
}

function buildColumns(content: ProtocolContent): ScheduleColumn[] {
	const before = countBefore(content);
	const isAllocated = content.arms.length > 1;
	const visits = content.visits.map((visit, index): ScheduleColumn => {
		const isBefore = isAllocated && index < before;
		const after = isAllocated ? index - before + 1 : index + 1;
		return {
			key: `visit-${visit.number}`,
			period: isBefore ? 'Before allocation' : 'After allocation',
			timepoint: isBefore ? `−t${before - index}` : `t${after}`,
			label: visit.label,
			window: writeWindow(visit)
		};
	});
	const enrolment: ScheduleColumn = {
		key: 'enrolment',
		period: 'Enrolment',
		timepoint: `−t${(isAllocated ? before : 0) + 1}`,
		label: 'Enrolment',
		window: 'before any visit'
	};
	if (!isAllocated) return [enrolment, ...visits];
	const allocation: ScheduleColumn = {
		key: 'allocation',
		period: 'Allocation',
		timepoint: '0',
		label: 'Allocation',
		window: before > 0 ? 'once baseline data pass' : 'within the first visit, after baseline'
	};
	return [enrolment, ...visits.slice(0, before), allocation, ...visits.slice(before)];
}

function writeWindow({ gapBefore }: VisitPlan): string {
	if (!gapBefore) return 'first visit';
	const { minHours, targetHours, maxHours } = gapBefore;
	return `+${targetHours} h (${minHours}–${maxHours})`;
}

function enrolmentRows(content: ProtocolContent, columns: ScheduleColumn[]): ScheduleRow[] {
	const at = (key: string) => marksAt(columns, (column) => column.key === key);
	return [
		{ key: 'screen', label: 'Eligibility screen', marks: at('enrolment') },
		{
			key: 'consent',
			label: `Informed consent, text ${content.consentTextVersion}`,
			marks: at('enrolment')
		},
		...(content.arms.length > 1
			? [{ key: 'allocation', label: 'Allocation', marks: at('allocation') }]
			: [])
	];
}

function interventionRows(
	content: ProtocolContent,
	columns: ScheduleColumn[],
	{ withRule }: Options
): ScheduleRow[] {
	return content.arms.map(({ key, name }) => ({
		key: `arm-${key}`,
		label: name,
		marks: marksAtVisits(content, columns, (visit) => {
			const blocks = blocksOfArm(visit, withRule ? key : null);
			return blocks.some(({ purpose }) => !notIntervention.has(purpose));
		})
	}));
}

function assessmentRows(
	content: ProtocolContent,
	columns: ScheduleColumn[],
	{ withRule }: Options
): ScheduleRow[] {
	const arms = withRule ? [null, ...content.arms.map(({ key }) => key)] : [null];
	const blocks = assessed.map((purpose) => ({
		key: `block-${purpose}`,
		label: `${capitalise(purposeWords[purpose].label)} block`,
		marks: marksAtVisits(content, columns, (visit) =>
			arms.some((arm) => blocksOfArm(visit, arm).some((block) => block.purpose === purpose))
		)
	}));
	return [
		...blocks.filter(({ marks }) => marks.includes(mark)),
		...outcomeRows(content, columns),
		{
			key: 'trials',
			label: 'Result of every trial',
			marks: marksAtVisits(content, columns, () => true)
		},
		{
			key: 'harm',
			label: 'Pain, fatigue, adverse events',
			marks: marksAtVisits(content, columns, () => true)
		}
	];
}

function outcomeRows(content: ProtocolContent, columns: ScheduleColumn[]): ScheduleRow[] {
	const { analysis, comparison } = content;
	if (analysis && analysis.outcomes.length > 0) {
		return analysis.outcomes.map(({ name, rank, visitNumber }, index) => ({
			key: `outcome-${index + 1}`,
			label: `${name} (${rank})`,
			marks: marksAtVisits(content, columns, ({ number }) => number === visitNumber)
		}));
	}
	if (!comparison) return [];
	const retention = content.visits.filter(({ kind }) => kind === 'retention');
	const last = retention.length > 0 ? retention : content.visits.slice(-1);
	return [
		{
			key: 'outcome-1',
			label: `${comparison.outcome} (primary)`,
			marks: marksAtVisits(content, columns, (visit) => last.includes(visit))
		}
	];
}

function marksAt(columns: ScheduleColumn[], isMarked: (column: ScheduleColumn) => boolean) {
	return columns.map((column) => (isMarked(column) ? mark : ''));
}

function marksAtVisits(
	{ visits }: ProtocolContent,
	columns: ScheduleColumn[],
	isMarked: (visit: VisitPlan) => boolean
): string[] {
	const marked = new Set(visits.filter(isMarked).map(({ number }) => `visit-${number}`));
	return marksAt(columns, ({ key }) => marked.has(key));
}

function capitalise(text: string): string {
	return text.charAt(0).toUpperCase() + text.slice(1);
}
