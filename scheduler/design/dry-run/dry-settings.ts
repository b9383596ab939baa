import { z } from 'zod';
import type { ProtocolContent } from '../../protocol/protocol-content.ts';
import type { WeeklyWindow } from '../../booking/types.ts';

/** How invented people come and stay away. */
export const drySettingsSchema = z.strictObject({
	people: z.number().int().min(1).max(200),
	seed: z.number().int().nonnegative(),
	/** When the first of them may come, epoch ms. */
	startMs: z.number(),
	arrivalsPerWeek: z.number().positive().max(100),
	/** Chance that somebody misses a visit, and that they leave the study at one. */
	missShare: z.number().min(0).max(0.9),
	dropShare: z.number().min(0).max(0.9),
	/** Days ahead within which a chain must find its places. */
	horizonDays: z.number().int().min(7).max(400).default(84)
});
export type DrySettings = z.output<typeof drySettingsSchema>;

/** The lab as the dry run books it: nothing else is booked there. */
export interface DryLab {
	readonly zone: string;
	readonly holidays: readonly string[];
	readonly rigs: readonly { id: string; roomId: string | null; hours: readonly WeeklyWindow[] }[];
	readonly staff: readonly { id: string; hours: readonly WeeklyWindow[] }[];
}

export interface DryRunRequest {
	readonly content: ProtocolContent;
	readonly lab: DryLab;
	readonly settings: DrySettings;
}

/** What nobody can get past, or what the protocol says nothing about. */
export const DEAD_END_CODES = [
	'no-chain',
	'no-rebooking',
	'nothing-declared',
	'no-master',
	'master-behind',
	'not-ready',
	'day-full',
	'over-time',
	'cannot-run'
] as const;
export type DeadEndCode = (typeof DEAD_END_CODES)[number];

export interface DeadEnd {
	readonly code: DeadEndCode;
	readonly person: string;
	readonly arm: string;
	/** Number of the visit; null: before any. */
	readonly visit: number | null;
	readonly text: string;
	readonly remedy: string;
}

/** What became of one visit of an invented person. */
export interface DryVisit {
	readonly number: number;
	readonly startMs: number;
	readonly state: 'attended' | 'missed' | 'not-run';
	/** Kinds of the blocks that ran, in order. */
	readonly kinds: readonly string[];
	/** Blocks that ran as fallback because somebody should have looked. */
	readonly fallbacks: number;
}

export interface DryPerson {
	readonly code: string;
	readonly arm: string;
	readonly master: string | null;
	readonly visits: readonly DryVisit[];
	readonly end: 'finished' | 'left' | 'stopped-practice' | 'not-booked';
}

export interface DryRunReport {
	readonly people: readonly DryPerson[];
	readonly deadEnds: readonly DeadEnd[];
	readonly rigHours: number;
	readonly firstMs: number | null;
	readonly lastMs: number | null;
}
