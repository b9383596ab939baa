import type { ProtocolDraft } from './protocol-draft';
import { visitName } from './visit-name';

/** Names of fields that are not plain from their key. */
const names: Record<string, string> = {
	minHours: 'shortest gap, h',
	targetHours: 'wanted gap, h',
	maxHours: 'longest gap, h',
	minutes: 'length, min',
	setupMinutes: 'set-up, min',
	cleanupMinutes: 'clean-up, min',
	restMinutes: 'length of the rest, min',
	restAfterMinutes: 'rest after, min',
	restBetweenTrialsSeconds: 'rest between trials, s',
	effectD: 'effect d',
	isOn: 'in use',
	mu: 'friction',
	D: 'distance'
};

/** Where in a draft a path leads to, in words: 'Day 3, block 2, trials'. Indexes count from 0. */
export function nameDraftPlace({ visits, arms }: ProtocolDraft, path: readonly string[]): string {
	const [part = '', first = '', ...rest] = path;
	if (part === 'visits' && first !== '') {
		const visit = visits[Number(first)] ?? { label: '' };
		return [visitName(visit, Number(first)), ...nameInVisit(arms, rest)].join(', ');
	}
	if (part === 'arms' && first !== '') {
		const name = arms[Number(first)]?.name.trim();
		return [name ? `arm “${name}”` : `arm ${Number(first) + 1}`, ...rest.map(nameKey)].join(', ');
	}
	return path.map(nameKey).join(', ');
}

function nameInVisit(
	arms: ProtocolDraft['arms'],
	[list = '', ...rest]: readonly string[]
): string[] {
	if (list === 'blocks') return nameInList(rest);
	if (list === 'gapBefore') return rest.map(nameKey);
	if (list !== 'armBlocks') return [list, ...rest].filter(Boolean).map(nameKey);
	const [key = '', ...more] = rest;
	const arm = arms.find((one) => one.key === key)?.name || key;
	return [`of ${arm}`, ...nameInList(more)];
}

function nameInList([index = '', ...rest]: readonly string[]): string[] {
	return index === '' ? ['blocks'] : [`block ${Number(index) + 1}`, ...rest.map(nameKey)];
}

/** 'sameTimeToleranceMinutes' reads 'same time tolerance minutes'; a place in a list its number. */
function nameKey(key: string): string {
	if (/^\d+$/.test(key)) return String(Number(key) + 1);
	return names[key] ?? key.replace(/[A-Z]/g, (letter) => ` ${letter.toLowerCase()}`);
}
