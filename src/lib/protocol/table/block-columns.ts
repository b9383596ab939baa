import { BLOCK_PURPOSES, type BlockPurpose } from '$scheduler/protocol/block-plan';
import { FEEDBACKS } from '$scheduler/policies/obligation-settings';
import type { TextColumn } from '../../ui/table-text';
import type { BlockDraft } from '../draft-parts';
import { draftVariables } from '../ladder/draft-variables';
import { feedbackWords } from '../ladder/feedback-words';
import type { TaskDraft } from '$lib/tasks/task-draft';
import { purposeWords } from '../purpose-words';

/** A column of the table of blocks. */
export type BlockColumn = TextColumn<string> & {
	unit?: string;
	/** Texts of which one must stand there; empty is allowed. */
	options?: readonly string[];
	isNumber?: boolean;
	isWhole?: boolean;
	max?: number;
	isFixed?: boolean;
};

export const everyArm = 'every arm';
export const purposeLabels = BLOCK_PURPOSES.map((purpose) => purposeWords[purpose].label);
export const feedbackLabels = FEEDBACKS.map((feedback) => feedbackWords[feedback]);

type NumberKey = {
	[Key in keyof BlockDraft]: BlockDraft[Key] extends number | null ? Key : never;
}[keyof BlockDraft];
type NumberColumn = {
	key: NumberKey;
	label: string;
	unit: string;
	max: number;
	isWhole?: boolean;
	names: string[];
};

export const numberColumns: readonly NumberColumn[] = [
	{ key: 'trials', label: 'trials', unit: '', max: 5000, isWhole: true, names: ['n', 'trials'] },
	{
		...{ key: 'restMinutes', label: 'rest length', unit: 'min', max: 240 },
		names: ['length', 'rest minutes', 'length of the rest']
	},
	{
		...{ key: 'warmUpTrials', label: 'warm-up', unit: '', max: 500, isWhole: true },
		names: ['warm-up trials', 'warmup', 'warm up']
	},
	{
		...{ key: 'restBetweenTrialsSeconds', label: 'rest between trials', unit: 's', max: 600 },
		names: ['between trials', 'inter-trial interval', 'iti']
	},
	{
		...{ key: 'restAfterMinutes', label: 'rest after', unit: 'min', max: 240 },
		names: ['rest after block', 'break after', 'break']
	},
	{
		...{ key: 'targetOffset', label: 'other target', unit: '', max: 1e6 },
		names: ['transfer offset', 'target offset', 'offset']
	}
];

const column = (key: string, label: string, more: Partial<BlockColumn> = {}): BlockColumn => {
	const unit = more.unit ? [`${label} (${more.unit})`, `${label}, ${more.unit}`] : [];
	const names = [label, key.toLowerCase(), ...unit, ...(more.names ?? [])];
	return { key, ...more, label: unit[0] ?? label, names: names.map((name) => name.toLowerCase()) };
};

/** Every column, in the order in which rows without a head are read. */
export function listBlockColumns(task: TaskDraft): BlockColumn[] {
	const { variables, resultUnit } = draftVariables(task);
	const placed = variables.flatMap(({ name, unit }, index) => [
		column(`center${index}`, `region middle ${name}`, { unit, isNumber: true, max: 1e9 }),
		column(`halfWidth${index}`, `region half width ${name}`, { unit, isNumber: true, max: 1e9 })
	]);
	return [
		column('arm', 'arm', { isFixed: true, names: ['arms', 'group', 'condition'] }),
		column('visit', 'visit', { isFixed: true, names: ['day', 'session'] }),
		column('block', 'block', { isFixed: true, names: ['block number', 'nr', 'no', '#'] }),
		column('purpose', 'purpose', { options: purposeLabels, names: ['kind', 'type'] }),
		...numberColumns.map(({ key, label, names, ...more }) =>
			column(key, label, {
				...{ isNumber: true, names, ...more },
				...(key === 'targetOffset' ? { unit: resultUnit } : {})
			})
		),
		column('instruction', 'instruction', { names: ['instructions', 'instruction version'] }),
		column('feedback', 'feedback', { options: feedbackLabels }),
		column('shiftFrom', 'shift from', { unit: resultUnit, isNumber: true, max: 1e6 }),
		column('shiftTo', 'shift to', { unit: resultUnit, isNumber: true, max: 1e6 }),
		...placed
	];
}

/** Columns that are shown although no block says anything in them. */
export const usualColumns = new Set([
	...['arm', 'visit', 'block', 'purpose', 'trials'],
	...['warmUpTrials', 'restAfterMinutes', 'instruction', 'feedback']
]);

export function purposeNamed(text: string): BlockPurpose | null {
	const wanted = text.trim().toLowerCase();
	return (
		BLOCK_PURPOSES.find((purpose) => {
			const { label, short } = purposeWords[purpose];
			return [purpose, label, short].includes(wanted);
		}) ?? null
	);
}

export function feedbackNamed(text: string): BlockDraft['feedback'] {
	const wanted = text.trim().toLowerCase();
	return FEEDBACKS.find((feedback) => [feedback, feedbackWords[feedback]].includes(wanted)) ?? null;
}
