import { describeAims, describeGuardRails } from './describe-rule';
import { describeTask } from './describe-task';
import { describeVisits } from './describe-visits';
import { writeClockText } from './clock-text';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';

/** One line of the readable protocol; `key` names the same line in every version. */
export type ProtocolLine = { key: string; term: string; text: string };
export type ProtocolPart = { key: string; title: string; lines: ProtocolLine[] };

const weekdayNames = ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun'];

/**
 * A frozen version in plain words. `withRule` adds how blocks are chosen and what is held, which
 * roles that must not know block parameters do not read.
 */
export function describeProtocol(
	content: ProtocolContent,
	{ withRule }: { withRule: boolean }
): ProtocolPart[] {
	const rule = withRule ? [describeAims(content), describeGuardRails(content)] : [];
	return [
		{ key: 'task', title: 'Task', lines: describeTask(content.task) },
		{ key: 'arms', title: 'Arms', lines: describeArms(content) },
		{ key: 'visits', title: 'Visits', lines: describeVisits(content.visits) },
		{ key: 'booking', title: 'Booking', lines: describeBooking(content) },
		...rule,
		{ key: 'hours', title: 'Hours', lines: describeHours(content) },
		{ key: 'comparison', title: 'Primary comparison', lines: describeComparison(content) },
		{ key: 'limits', title: 'Limits and consent', lines: describeLimits(content) }
	].filter(({ lines }) => lines.length > 0);
}

function describeArms({ arms }: ProtocolContent): ProtocolLine[] {
	const words = {
		adaptive: 'each block is chosen for the person from how they vary',
		fixed: 'every block is the protocol’s own, the same for all',
		yoked: 'each block of adaptive time repeats what a partner was given in'
	};
	const nameOf = (key: string) => arms.find((arm) => arm.key === key)?.name ?? key;
	return arms.map(({ key, name, rule, master }) => ({
		key: `arm-${key}`,
		term: name,
		text: master ? `${words[rule]} ${nameOf(master)}` : words[rule]
	}));
}

function describeBooking({ booking }: ProtocolContent): ProtocolLine[] {
	const { earliestMinute, latestMinute, weekdays, sameTimeToleranceMinutes, pauses } = booking;
	const clock = `${writeClockText(earliestMinute)} to ${writeClockText(latestMinute)}, lab time`;
	return [
		{ key: 'clock', term: 'Starts', text: clock },
		{
			key: 'weekdays',
			term: 'Weekdays',
			text: weekdays.map((weekday) => weekdayNames[weekday - 1]).join(', ')
		},
		{
			key: 'same-time',
			term: 'Same time of day',
			text: `within ${sameTimeToleranceMinutes} min of the first practice visit`
		},
		{
			key: 'pauses',
			term: 'Longer gaps',
			text:
				pauses.count === 0
					? 'none allowed'
					: `${pauses.count} of ${pauses.minHours} to ${pauses.maxHours} h a person`
		}
	];
}

function describeHours(content: ProtocolContent): ProtocolLine[] {
	const { min, max } = content.earliestStartHours;
	if (content.visits.length < 2) return [];
	return [
		{
			key: 'lead',
			term: 'Blocks are ready',
			text: `${content.readyLeadHours} h before the visit, in every arm`
		},
		{
			key: 'invitations',
			term: 'Later invitations',
			text: `${content.invitationDelayHours} h after the baseline visit, in every arm`
		},
		{
			key: 'earliest-start',
			term: 'Earliest start',
			text: `drawn for everybody, ${min} to ${max} h after allocation`
		}
	];
}

function describeComparison({ comparison, arms }: ProtocolContent): ProtocolLine[] {
	if (!comparison) return [];
	const name = (key: string) => arms.find((arm) => arm.key === key)?.name ?? key;
	const percent = (share: number) => `${Math.round(share * 1000) / 10} %`;
	const { alpha, sides, effectD, effectSource, peoplePerArm } = comparison;
	const source = (text: string | undefined) => (text ? `; ${text}` : '; no source given');
	return [
		{
			key: 'what',
			term: 'Compared',
			text: `${name(comparison.armA)} against ${name(comparison.armB)} on ${comparison.outcome}`
		},
		{ key: 'test', term: 'Test', text: `two-sample t, ${sides}-sided, alpha ${alpha}` },
		{ key: 'effect', term: 'Effect', text: `d = ${effectD}${source(effectSource)}` },
		{ key: 'people', term: 'People', text: `${peoplePerArm} per arm at the start` },
		{
			key: 'people-lost',
			term: 'People lost',
			text: percent(comparison.peopleLostShare) + source(comparison.peopleLostSource)
		},
		{
			key: 'effect-lost',
			term: 'Effect lost',
			text: percent(comparison.effectLostShare) + source(comparison.effectLostSource)
		}
	];
}

function describeLimits({ limits, consentTextVersion, variants }: ProtocolContent): ProtocolLine[] {
	return [
		{ key: 'minutes', term: 'Minutes a visit', text: `at most ${limits.minutesPerVisit}` },
		{ key: 'trials', term: 'Trials a visit', text: `at most ${limits.trialsPerVisit}` },
		{ key: 'consent', term: 'Consent text', text: `version ${consentTextVersion}` },
		...variants.map((variant) => ({
			key: `variant-${variant}`,
			term: 'Declared',
			text: variant.replaceAll('-', ' ')
		}))
	];
}
