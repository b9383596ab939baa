import type { ValueReader, WordContext } from './read-values.ts';

/** A sentence about a code; `values` are the numbers of its reason. */
export type Sentence = (values: ValueReader, context: WordContext) => string;

const LIMITS: Record<string, Sentence> = {
	'OPERATOR-STOP': () => 'The operator stopped the day.',
	PAIN: (v) => `Pain was rated ${v.count('pain')} of 10; from ${v.count('limit')} on the day ends.`,
	'DAY-DONE': () => 'All blocks of this day have been run.',
	'TRIALS-TODAY': (v) =>
		`${v.count('trials')} trials were made today; another block would pass the limit of ${v.count('limit')}.`,
	FATIGUE: (v) =>
		`Fatigue was rated ${v.count('fatigue')} of 10; from ${v.count('limit')} on there is a rest, and after a rest the day ends.`
};

const PERSON: Record<string, Sentence> = {
	TRACE: () =>
		'The levels that the rig returned differ from the replay of its trials. Somebody must look before the next block.',
	OUTLIERS: (v) =>
		v.has('share')
			? `${v.percent('share')} of the trials lie far from all others; up to 20 % is usual. Check the rig, then release.`
			: 'Many trials lie far from all others. Check the rig, then release.',
	OSCILLATION: (v) =>
		`The kind of block went back and forth ${v.count('returns')} times without an outside reason.`,
	STUCK: (v) =>
		`${v.count('blocks')} decisions in a row found nothing to work on but practice. Look whether the task or the protocol fits this person.`
};

const OBLIGATIONS: Record<string, Sentence> = {
	'RETENTION-DUE': (v) =>
		v.has('gapHours')
			? `The protocol asks for a retention block today; the last block was ${v.decimal('gapHours', 0)} hours ago.`
			: 'The protocol asks for a retention block here.',
	'WASHOUT-DUE': () => 'Washout is due: the target is back in its place.',
	'PROBE-ESCAPE': () =>
		'The person has moved out of the penalized region: a probe without a region shows where to.',
	'PROBE-DECLARED': () => 'The protocol asks for a probe here.',
	'CLAMP-DUE': () =>
		'The protocol asks for an error clamp here: the shown error does not follow what the person does.',
	'TRANSFER-DUE': () => 'The protocol asks for a block at another target here.',
	'PROBE-DUE': (v) =>
		`${v.count('blocks')} perturbed blocks have been run since the last probe: one without a perturbation is due.`
};

const DATA: Record<string, Sentence> = {
	FEW: (v) =>
		v.has('n')
			? `The last block has only ${v.count('n')} usable trials, too few for a cloud: the same kind of block again.`
			: 'The last block was broken off before half its trials: it does not count.',
	'FEW-POOLED': () =>
		'The last block has few trials; its cloud was held up by the reference cloud of this person.',
	SINGULAR: () =>
		'The trials do not spread in every direction, or less than the rig can measure: the earlier cloud is kept.',
	'TWO-CLOUDS': () =>
		'The trials form two clouds of similar size: practice until one is preferred.',
	BIMODAL: () => 'The trials form two clouds.',
	MODE: () => 'The trials form two clouds; the larger one stands for the person.',
	DRIFT: () => 'The trials wandered during the block: it is repeated once.',
	'DRIFT-USED': () =>
		'The trials wandered again, but little: the last third of the block stands for the person.',
	'NO-BASELINE': () => 'There is no usable block yet that shows the person’s own cloud.',
	OFF: (v) =>
		v.has('fMean')
			? `The trials lie beside the target: their mean result is ${v.result('fMean')}, up to ${v.result('limit')} is allowed. Practice first.`
			: 'The trials lie beside the target. Practice first.'
};

const COURSE: Record<string, Sentence> = {
	'CONTINUE-REGION': (v) =>
		v.has('solved')
			? `The penalized region goes on: ${v.count('solved')} of the last ${v.count('n')} trials hit outside it, which does not settle yet whether the person has moved.`
			: 'The penalized region goes on.',
	'CONTINUE-SHIFT': (v) =>
		`The target shift goes on at ${v.result('level')}; ${v.result('passed')} has been followed so far.`,
	MAINTENANCE: () => 'All aims are met: a block to keep what was learned.',
	'COOL-DOWN': (v) =>
		`Plain practice after a perturbation: ${v.count('blocks')} blocks and ${v.count('trials')} trials are left of it.`,
	UNCHANGED: () =>
		'Nothing has changed since the last offer, which was not run: the same block with the same numbers.',
	'PROTOCOL-BLOCK': () => 'The protocol lists this block.'
};

const YOKED: Record<string, Sentence> = {
	YOKED: (v) =>
		v.has('leadHours')
			? `The master’s block ${v.count('block')}, scored ${v.decimal('leadHours', 0)} hours ago.`
			: `The master’s block ${v.count('block')}.`,
	'RE-PAIRED': (v) =>
		`The master has withdrawn: block ${v.count('block')} of the nearest finished master without a partner.`,
	'ORPHAN-KEEP': () =>
		'The master has withdrawn: the last level goes on, as the protocol declares.',
	'ORPHAN-PRACTICE': () => 'The master has withdrawn: plain practice, as the protocol declares.',
	'LATE-WAIT': (v) =>
		`The master’s block ${v.count('block')} is not scored yet: this one waits for it, to the end of the longest gap.`,
	'LATE-KEEP': () => 'The master’s block is not scored yet: the last level goes on, as declared.',
	'LATE-PRACTICE': () => 'The master’s block is not scored yet: plain practice, as declared.'
};

const SETTLING: Record<string, Sentence> = {
	'FIRST-BLOCKS': (v, { settings }) =>
		`${v.count('blocks')} of at least ${settings.settle.minBlocks} plain blocks have been run: the error cannot be judged yet.`,
	IMPROVING: (v) =>
		`The error still falls, by ${changeOf(v)} over the last ${v.count('blocks')} plain blocks: practice goes on.`,
	WORSENING: (v) =>
		`The error rises, by ${changeOf(v)} over the last ${v.count('blocks')} plain blocks: practice goes on.`,
	UNDECIDED: (v) =>
		v.has('changeSd')
			? `Whether the error stands still is not clear yet (change ${changeOf(v)}): one more plain block.`
			: 'Whether the error stands still is not clear yet: one more plain block.',
	CHANGED: (v) =>
		v.has('distance')
			? `The person’s cloud has changed (distance ${v.decimal('distance')}, limit ${v.decimal('limit')}): practice until it stands still again.`
			: 'The person’s cloud has changed: practice until it stands still again.'
};

function changeOf(v: ValueReader): string {
	return `${v.decimal('changeSd')} ± ${v.decimal('se')} SD of a trial`;
}

const CHALLENGE: Record<string, Sentence> = {
	ELLIPSOID: (v) =>
		v.has('alignmentDeg')
			? `Chosen by the shape of the cloud: its long axis lies ${v.decimal('alignmentDeg', 0)}° from the solutions, its variances are ${v.decimal('eigenvalueRatio', 1)} to 1.`
			: `Chosen by the shape of the cloud: its variances are ${v.decimal('eigenvalueRatio', 1)} to 1.`,
	'AIM-BEHIND': () => 'The other aim lacks more of its share of the trials: this one is taken up.',
	'STAY-WITH-AIM': () =>
		'The aim of the last challenge is kept; the other one does not lag enough.',
	'SWITCH-AIM': () => 'The last challenge failed: the other aim is taken up.',
	'ONLY-AIM': () => 'Only this aim is open now.',
	'REGION-IMPOSSIBLE': () =>
		'No penalized region can be placed here: the target is shifted instead.',
	'REGION-ACROSS': (v) =>
		`The cloud lies across the solutions (${v.decimal('alignmentDeg', 0)}°): the target is shifted instead of penalizing a region.`,
	LEAN: (v) =>
		`A region around the person’s own mean would leave no way out; moved by ${v.decimal('lean')} own SD along the solutions it leaves one and still catches ${v.percent('catch')} of the trials.`,
	'NO-CHALLENGE': () => 'Neither a penalized region nor a target shift is possible now: practice.'
};

const BLOCK_END: Record<string, Sentence> = {
	ESCAPED: (v) =>
		`The person has moved out of the region: ${v.count('solved')} of the last ${v.count('n')} trials hit outside it, ${v.percent('stay')} would without moving.`,
	'NO-ESCAPE': () =>
		'The region ran for as many blocks as are allowed and the person did not move out: recovery.',
	BURDEN: () => 'The perturbation cost too much success: recovery.',
	'SHIFT-HELD': (v) => `The target shift was followed up to its goal of ${v.result('level')}.`,
	'SHIFT-FROZEN': (v) =>
		`The target shift was not followed beyond ${v.result('passed')}; this aim is closed.`,
	PAUSED: () => 'Success under the target shift fell too low: recovery, then it goes on.'
};

/** The sentence of every code that a reason can have. */
export const REASON_WORDS: Readonly<Record<string, Sentence>> = {
	...LIMITS,
	...PERSON,
	...OBLIGATIONS,
	...DATA,
	...COURSE,
	...SETTLING,
	...CHALLENGE,
	...YOKED,
	...BLOCK_END
};
