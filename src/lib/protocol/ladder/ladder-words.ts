import type { ArmDraft, VisitDraft } from '../draft-parts';

/** '24 h' and '(20–28)' below a visit's name; what the first visit is for the arms. */
export function gapWords(
	{
		gapBefore
	}: { gapBefore: Pick<VisitDraft['gapBefore'], 'minHours' | 'targetHours' | 'maxHours'> | null },
	index: number,
	armCount: number
): string[] {
	if (index === 0 || !gapBefore) return armCount > 1 ? ['arm drawn', 'after'] : [];
	const show = (hours: number | null) => hours ?? '?';
	const { targetHours, minHours, maxHours } = gapBefore;
	return [`${show(targetHours)} h`, `(${show(minHours)}–${show(maxHours)})`];
}

/** What an arm's blocks are, below its name. */
export function ruleText(
	{ rule, master }: Pick<ArmDraft, 'rule'> & { master?: string | null | undefined },
	arms: readonly { key: string; name: string }[]
): string {
	if (rule === 'fixed') return 'same blocks for all';
	if (rule === 'adaptive') return 'slots filled person by person';
	const name = arms.find(({ key }) => key === master)?.name ?? 'another arm';
	return `gets what the partner in ${name} got`;
}
