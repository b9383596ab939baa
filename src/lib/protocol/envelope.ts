import { policySettingsSchema } from '$scheduler/policies/policy-settings';
import { taskRecordSchema } from '$scheduler/tasks/task-record';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { hasAdaptiveTime } from './has-adaptive-time';
import { writePercent } from './write-percent';

/** One number of a block that lies outside what was approved. */
export type EnvelopeBreach = {
	limit: string;
	approved: number;
	found: number;
	unit: string;
};

/** The most that any decision may do under a version; a number that is not limited is null. */
export type Envelope = {
	trialsPerVisit: number;
	minutesPerVisit: number;
	/** Trials of a day on which the rule still challenges. */
	trialsPerDay: number | null;
	/** Largest share of a person's own trials that a region of the rule may catch. */
	regionShare: number | null;
	/** Farthest way out of a region, in the person's own SD along the line. */
	reachSd: number | null;
	/** Largest step and level of a moved target, in SD of the person's own result. */
	shiftStepSd: number | null;
	shiftLevelSd: number | null;
	/** Limits of the protocol on what is done, whoever decides it. */
	penaltyShare: number | null;
	shiftLevel: number | null;
	resultUnit: string;
	variableMax: Readonly<Record<string, number>>;
	/** Seconds of a trial and the rest after it; null where not said. */
	trialSeconds: number | null;
	names: readonly string[];
};

/** Reads from a frozen version the most that decisions may do: the numbers that a board approves. */
export function readEnvelope(content: ProtocolContent): Envelope {
	const { limits, policy } = content;
	const settings = policySettingsSchema.safeParse(policy).data;
	const rule = settings && hasAdaptiveTime(content) ? settings : null;
	const task = taskRecordSchema.safeParse(content.task).data;
	const { region, shift } = rule?.aims ?? {};
	return {
		trialsPerVisit: limits.trialsPerVisit,
		minutesPerVisit: limits.minutesPerVisit,
		trialsPerDay: rule?.limits.trialsPerDay ?? null,
		regionShare: rule && (region ? Math.max(...rule.place.shares) : 0),
		reachSd: rule && region ? rule.place.reachMaxSd : null,
		shiftStepSd: rule && shift ? rule.shift.rule.stepCapSd : null,
		shiftLevelSd: rule && (shift ? Math.abs(shift.goal) : 0),
		penaltyShare: limits.penaltyShareMax ?? null,
		shiftLevel: limits.shiftMax ?? null,
		resultUnit: task?.resultUnit ?? '',
		variableMax: limits.variableMax ?? {},
		trialSeconds: content.trialSeconds ?? null,
		names: task?.variables.map(({ name }) => name) ?? []
	};
}

/** The approved numbers as lines to read. */
export function describeEnvelope(envelope: Envelope): { term: string; text: string }[] {
	const { trialsPerDay, regionShare, reachSd, shiftStepSd, shiftLevelSd } = envelope;
	const { penaltyShare, shiftLevel, resultUnit, variableMax } = envelope;
	const when = (value: number | null, term: string, write: (value: number) => string) =>
		value === null ? [] : [{ term, text: value === 0 ? 'none' : write(value) }];
	return [
		{ term: 'Trials a visit', text: `at most ${envelope.trialsPerVisit}` },
		{ term: 'Minutes a visit', text: `at most ${envelope.minutesPerVisit}` },
		...when(trialsPerDay, 'Challenges', (value) => `none after ${value} trials of a day`),
		...when(
			regionShare,
			'Penalized regions of the rule',
			(value) => `catch at most ${writePercent(value)} of a person’s own trials`
		),
		...when(reachSd, 'Way out of a region', (value) => `at most ${value} of the person’s own SD`),
		...when(
			shiftStepSd,
			'Step of the target',
			(value) => `at most ${value} SD of the person’s own result`
		),
		...when(
			shiftLevelSd,
			'Target moved by the rule',
			(value) => `at most ${value} SD of the person’s own result`
		),
		...when(penaltyShare, 'Penalty, whoever decides', (value) => `at most ${writePercent(value)}`),
		...when(shiftLevel, 'Target, whoever decides', (value) =>
			`moved by at most ${value} ${resultUnit}`.trim()
		),
		...Object.entries(variableMax).map(([name, max]) => ({
			term: `Largest ${name}`,
			text: String(max)
		}))
	];
}
