import { openingGroup, placingGroup, regionRunGroup } from './region-fields';
import { shiftGroup } from './shift-fields';
import { bandGroup, lookingBackGroup, personGroup, settleGroup } from './timing-fields';
import type { PolicyField, PolicyGroup } from './policy-field';

/** Every setting of the policy that its form asks for one by one, in the order of the form. */
export const policyGroups: readonly PolicyGroup[] = [
	settleGroup,
	bandGroup,
	openingGroup,
	placingGroup,
	regionRunGroup,
	shiftGroup,
	lookingBackGroup,
	personGroup
];

export const policyFields: readonly PolicyField[] = policyGroups.flatMap(({ fields }) => fields);

/**
 * Settings with a form of their own or that follow from another part of the protocol: aims and due blocks,
 * and the lengths of blocks, which are those of adaptive time whatever the kind.
 */
export const settingsElsewhere: readonly string[] = [
	'aims',
	'obligations',
	'settle.minBlocks',
	'settle.maxBlocks',
	'blockTrials',
	'probeTrials',
	'washoutTrials',
	'retentionTrials',
	'recoveryTrials',
	'limits.trialsPerDay'
];
