import type { ProtocolDraft } from './protocol-draft';

/** The engine's policy with whatever was typed, unchecked; settings without a field are kept. */
export function buildPolicy({ aims, settle, otherPolicy, visits, limits }: ProtocolDraft) {
	const { region, shift } = aims;
	const adaptive = visits.flatMap(({ blocks }) => blocks).find((b) => b.purpose === 'adaptive');
	const other = (key: string) => (otherPolicy[key] ?? {}) as Record<string, unknown>;
	return {
		...otherPolicy,
		blockTrials: adaptive?.trials ?? 60,
		aims:
			region.isOn || shift.isOn
				? {
						...(region.isOn ? { region: { share: region.share, escapes: region.escapes } } : {}),
						...(shift.isOn ? { shift: { share: shift.share, goal: shift.goal } } : {})
					}
				: undefined,
		settle: { ...other('settle'), minBlocks: settle.minBlocks, maxBlocks: settle.maxBlocks },
		limits: { ...other('limits'), trialsPerDay: Math.min(2000, limits.trialsPerVisit ?? 2000) }
	};
}
