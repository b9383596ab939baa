import { DESIGN_LIMITS } from '../design-limits.ts';
import { readPolicy } from '../design-policy.ts';
import {
	nameVisit,
	plainDesignBlock,
	type Design,
	type DesignArm,
	type DesignBlock
} from '../design.ts';
import type { Check, Finding } from '../finding.ts';
import { joinWords, listField, nameArm, writeCount } from '../walk-design.ts';

/** Purposes that measure people without a change. */
const MEASURES = ['probe', 'baseline', 'retention', 'transfer'];
/** Plain trials in which what a change left behind is washed out. */
const PLAIN = ['washout', 'practice'];
const NAMES = { region: 'a penalized region', shift: 'a target shift', adaptive: 'adaptive time' };

/** What still works in a person. */
interface Open {
	readonly kind: keyof typeof NAMES;
	readonly needed: number;
	readonly plain: number;
}

/** A measure that comes with too few plain trials after a change. */
interface Contact {
	readonly visit: number;
	readonly at: number;
	readonly list: string | null;
	readonly arm: DesignArm;
	readonly open: Open;
	readonly purpose: DesignBlock['purpose'];
}

/** Measures without a washout before them. */
export const checkWashout: Check = (design) => {
	const found = new Map<string, Contact[]>();
	for (const contact of design.arms.flatMap((arm) => findContacts(design, arm))) {
		const place = `v${contact.visit + 1}:b${contact.at + 1}`;
		const key = contact.list === null ? place : `${place}:${contact.list}`;
		found.set(key, [...(found.get(key) ?? []), contact]);
	}
	return [...found].map(([place, contacts]) => describe(design, place, contacts));
};

function findContacts(design: Design, arm: DesignArm): Contact[] {
	const afterAdaptive = openAdaptive(design, arm);
	const contacts: Contact[] = [];
	let open: Open | null = null;
	for (const [visit, { blocks, armBlocks }] of design.visits.entries()) {
		const own = armBlocks[arm.key];
		for (const [at, block] of (own ?? blocks).entries()) {
			const { purpose, trials } = block;
			const list = own ? arm.key : null;
			if (purpose === 'region' || purpose === 'shift') open = openListed(purpose, open);
			else if (purpose === 'adaptive') open = afterAdaptive ?? addPlain(open, trials, arm);
			else if (PLAIN.includes(purpose)) open = addPlain(open, trials);
			else if (open && MEASURES.includes(purpose)) {
				if (open.plain < open.needed) contacts.push({ visit, at, list, arm, open, purpose });
				open = null;
			}
		}
	}
	return contacts;
}

function openListed(kind: 'region' | 'shift', before: Open | null): Open {
	const needed =
		kind === 'shift' ? DESIGN_LIMITS.washoutAfterShift : DESIGN_LIMITS.washoutAfterRegion;
	const left = before ? Math.max(0, before.needed - before.plain) : 0;
	return left > needed && before
		? { ...before, plain: 0, needed: left }
		: { kind, needed, plain: 0 };
}

/** A missing count counts as enough: its own form asks for it. Adaptive time of a fixed arm is practice. */
function addPlain(open: Open | null, trials: number | null, arm?: DesignArm): Open | null {
	if (arm && arm.rule !== 'fixed') return null;
	return open && { ...open, plain: open.plain + (trials ?? open.needed) };
}

/** What adaptive time may leave behind; null: its own rules wash it out. */
function openAdaptive(design: Design, arm: DesignArm): Open | null {
	const policy = arm.rule === 'fixed' ? null : readPolicy(design);
	if (!policy) return null;
	const { aims, cool, blockTrials, washoutTrials } = policy;
	const cooled = Math.max(cool.blocks * blockTrials, cool.trials);
	const lacks = [
		...(aims.region ? [DESIGN_LIMITS.washoutAfterRegion - cooled] : []),
		...(aims.shift ? [DESIGN_LIMITS.washoutAfterShift - washoutTrials - cooled] : [])
	];
	const needed = Math.max(0, ...lacks);
	return needed > 0 ? { kind: 'adaptive', needed, plain: 0 } : null;
}

function describe(design: Design, place: string, contacts: readonly Contact[]): Finding {
	const [first] = contacts;
	if (!first) throw new RangeError('a finding needs a place');
	const { visit: index, at, list } = first;
	const visit = design.visits[index];
	if (!visit) throw new RangeError(`there is no visit ${index + 1}`);
	const missing = Math.max(...contacts.map(({ open }) => open.needed - open.plain));
	const worst = contacts.find(({ open }) => open.needed - open.plain === missing) ?? first;
	const { kind, plain, needed } = worst.open;
	const blocks = (list === null ? undefined : visit.armBlocks[list]) ?? visit.blocks;
	return {
		key: `no-washout:${place}`,
		code: 'no-washout',
		place: { visit: index + 1, block: at + 1, ...(list === null ? {} : { arm: list }) },
		field: `${listField(index, list)}.${at}`,
		numbers: { after: kind, plainTrials: plain, limit: needed },
		severity: 'serious',
		text: `${nameVisit(visit, index)}, block ${at + 1} (${first.purpose}), ${joinWords(contacts.map(({ arm }) => nameArm(arm)))}: ${plain === 0 ? 'no plain trial' : `only ${writeCount(plain, 'plain trial')}`} after ${NAMES[kind]}; ${needed} wash it out. The measure would hold what the change left behind.`,
		repair: {
			label: `Put in ${writeCount(missing, 'washout trial')}`,
			operations: [
				{
					...{ kind: 'set-blocks', visit: index, arm: list },
					blocks: blocks.toSpliced(at, 0, plainDesignBlock('washout', missing))
				}
			]
		}
	};
}
