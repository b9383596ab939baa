import type { FindingPlace, FindingCode } from '$scheduler/design/finding';
import type { Finding } from '$scheduler/design/finding';
import { checkDraft } from './edit/check-draft';
import type { Fault, RigLimit } from './fault';
import { findFaults } from './find-faults';
import { findingTitles } from './finding-words';
import type { ProtocolDraft } from './protocol-draft';

/** A finding of the checker with its note in the margin. */
export type NotedFinding = Finding & {
	/** Number of the note, and of the mark at the piece it is about; null once it is justified. */
	number: number | null;
	/** Why it stays, in writing; empty while nobody has said. */
	why: string;
	/** What forbids to let it stay: a limit, or an operator who would see the arm. */
	bar: Fault | null;
};

/** A number at a place of the ladder. */
export type FindingMark = { number: number; place: FindingPlace };

/** Faults that say the same as a finding at the same field: the note says both, and cannot be justified. */
const sameThing: Readonly<Record<string, FindingCode>> = {
	'over-minutes': 'burden',
	'over-trials': 'burden',
	'over-every-rig': 'burden',
	'policy-first-step': 'noise-rule',
	'blocks-tell-arm': 'unequal-trials'
};

export type Checked = {
	/** Faults that no finding tells already. */
	faults: Fault[];
	findings: NotedFinding[];
	marks: FindingMark[];
	/** What keeps the draft from being frozen. */
	toMendCount: number;
};

/** Faults and findings of a draft together, each said once. */
export function checkWhole(draft: ProtocolDraft, rigs: readonly RigLimit[]): Checked {
	const all = findFaults(draft, rigs);
	const isTold = (fault: Fault, { code, field }: Finding) =>
		sameThing[fault.code] === code && fault.field === field && fault.level === 'fault';
	const found = checkDraft(draft, { rigs });
	const faults = all.filter((fault) => !found.some((finding) => isTold(fault, finding)));
	let count = 0;
	const findings = found.map((finding): NotedFinding => {
		const bar = all.find((fault) => isTold(fault, finding)) ?? null;
		const why = (draft.justifications[finding.key] ?? '').trim();
		const isOpen = bar !== null || why === '';
		return { ...finding, bar, why, number: isOpen ? ++count : null };
	});
	const marks = findings.flatMap(({ number, place }) =>
		number === null ? [] : [{ number, place }]
	);
	const blocking = faults.filter(({ level }) => level === 'fault');
	return { faults, findings, marks, toMendCount: blocking.length + count };
}

/** Everything that keeps a draft from being frozen: faults, and findings neither mended nor justified. */
export function findFreezeFaults(draft: ProtocolDraft, rigs: readonly RigLimit[]): Fault[] {
	const { faults, findings } = checkWhole(draft, rigs);
	const open = findings.filter(({ number }) => number !== null);
	return [
		...faults.filter(({ level }) => level === 'fault'),
		...open.map(({ code, field, text, bar, repair }): Fault => ({
			code,
			level: 'fault',
			place: findingTitles[code],
			field,
			text,
			remedy: `${repair ? `${repair.label}, or mend it otherwise` : 'Mend it'}${bar ? '.' : ', or say why it stays.'}`
		}))
	];
}
