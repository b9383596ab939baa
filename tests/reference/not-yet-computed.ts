/**
 * Cases of the method sheet that `verify` cannot compute yet, by topic. A case that passes must leave the
 * list, and none may join it.
 */
export const NOT_YET_COMPUTED: readonly string[] = [
	// tnc
	'tnc-tether'
];
