import type { RELAXABLE_RULES } from '$scheduler/protocol/booking-rules';

type Rule = (typeof RELAXABLE_RULES)[number];

/** Rules that may give way, with the unit of how far and what a new step opens with. */
export const relaxableRules: Readonly<Record<Rule, { name: string; unit: string; usual: number }>> =
	{
		'same-time': { name: 'the same time of day', unit: 'min', usual: 60 },
		'gap-longest': { name: 'the longest gap', unit: 'h', usual: 4 },
		'gap-shortest': { name: 'the shortest gap', unit: 'h', usual: 2 },
		'clock-window': { name: 'the hours of the day', unit: 'min', usual: 60 },
		weekdays: { name: 'the weekdays', unit: 'more days', usual: 1 },
		pauses: { name: 'longer gaps', unit: 'more', usual: 1 }
	};
