import { HOUR_MS } from '../../booking/local-date.ts';
import type { DecisionInputsInput } from '../../policies/decision-record.ts';
import type { PolicyMemory } from '../../policies/policy-memory.ts';
import {
	equaliseBlockLengths,
	policySettingsSchema,
	type PolicySettings
} from '../../policies/policy-settings.ts';
import type { LastBlock } from '../../policies/policy-state.ts';
import type { MasterBlock } from '../../policies/yoking/yoked-rule.ts';
import type { BlockPlan } from '../../protocol/block-plan.ts';
import { planListedBlock } from '../../protocol/plan-listed-block.ts';
import type { ProtocolContent } from '../../protocol/protocol-content.ts';
import type { ScaledTask } from '../../tasks/scaled-task.ts';
import type { Attended } from './attend-visits.ts';

/** What a partner can be given of a master: blocks of adaptive time in order, and when they were scored. */
export interface MasterCourse {
	readonly code: string;
	readonly withdrawn: boolean;
	readonly blocks: readonly MasterBlock[];
}

/** One block of a visit that is about to run. */
export interface DryPlace {
	readonly visit: Attended;
	readonly plan: BlockPlan;
	readonly index: number;
	readonly blocks: readonly BlockPlan[];
}

/** What is known of a person when a block is decided. */
export interface DryState {
	readonly content: ProtocolContent;
	readonly arm: string;
	readonly master: MasterCourse | null;
	readonly task: ScaledTask;
	readonly memory: PolicyMemory | null;
	readonly last: LastBlock | null;
	readonly lastEndMs: number | null;
	readonly trialsToday: number;
	/** Blocks of adaptive time that the person has run. */
	readonly adaptiveBlocks: number;
}

/** The inputs of a decision as the record would give them: policy, rule of the arm, state. */
export function describeDecision(
	state: DryState,
	place: DryPlace,
	release: boolean
): Pick<DecisionInputsInput, 'protocol' | 'rule' | 'state'> {
	return {
		protocol: readSettings(state, place),
		rule: findRule(state, place),
		state: describeDay(state, place, release)
	};
}

/** Blinding needs one length: every kind of block is as long as this place. */
function readSettings({ content }: DryState, { plan }: DryPlace): PolicySettings {
	const policy = policySettingsSchema.parse(content.policy);
	return equaliseBlockLengths({ ...policy, blockTrials: plan.trials });
}

function findRule(state: DryState, place: DryPlace): NonNullable<DecisionInputsInput['rule']> {
	const { content, arm: key, master, task, memory } = state;
	const arm = content.arms.find((found) => found.key === key);
	const isAdaptive = place.plan.purpose === 'adaptive';
	if (isAdaptive && arm?.rule === 'adaptive') return { kind: 'adaptive' };
	if (isAdaptive && arm?.rule === 'yoked' && master) return follow(state, place, master);
	return {
		kind: 'fixed',
		block: planListedBlock(place.plan, { task, cloud: memory?.cloud ?? null })
	};
}

function follow(
	{ content, lastEndMs, adaptiveBlocks }: DryState,
	{ visit }: DryPlace,
	master: MasterCourse
): NonNullable<DecisionInputsInput['rule']> {
	const plan = content.visits.find(({ number }) => number === visit.number);
	return {
		...{ kind: 'yoked', settings: content.yoking ?? {}, block: adaptiveBlocks },
		nowHours: visit.startMs / HOUR_MS,
		previousEndHours: (lastEndMs ?? visit.startMs) / HOUR_MS,
		gapMaxHours: plan?.gapBefore?.maxHours ?? 0,
		master: { ...master, blocks: [...master.blocks] }
	};
}

function describeDay(
	{ memory, last, lastEndMs, trialsToday }: DryState,
	{ visit, index, blocks }: DryPlace,
	release: boolean
): DecisionInputsInput['state'] {
	const later = blocks.slice(index).filter(({ purpose }) => purpose !== 'rest');
	const gap = lastEndMs === null ? null : (visit.startMs - lastEndMs) / HOUR_MS;
	return {
		...{ day: visit.number, blockInDay: index, blocksLeftToday: later.length, release },
		...{ trialsToday, last },
		trialsLeftToday: later.reduce((sum, { trials }) => sum + trials, 0),
		gapHours: index === 0 && gap !== null ? Math.max(0, gap) : null,
		...(memory ? { memory } : {})
	};
}
