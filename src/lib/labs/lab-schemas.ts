import { z } from 'zod';
import { isValidZone, suggestZone } from '$lib/time/is-valid-zone';
import { parseHolidayLines } from './holiday-lines';
import { readRigKey, rigKeyFaults } from './rig-key';
import { parseVariableLimits } from './variable-limits';
import { explainHoursFault, parseWeeklyHours } from './weekly-hours';

const line = (what: string, max = 80) =>
	z
		.string()
		.trim()
		.min(1, `Write ${what}.`)
		.max(max, `At most ${max} characters.`)
		.refine(
			(text) => !/[\p{Cc}\p{Cf}]/u.test(text),
			'Write it on one line, plain characters only.'
		);
const optionalLine = (max = 120) =>
	z
		.string()
		.trim()
		.max(max, `At most ${max} characters.`)
		.default('')
		.refine((text) => !/[\p{Cc}]/u.test(text), 'Write it on one line.');
const lines = (max: number) => z.string().trim().max(max, `At most ${max} characters.`).default('');
const emailField = z
	.string()
	.trim()
	.toLowerCase()
	.max(254, 'At most 254 characters.')
	.pipe(z.email('Write the whole address, such as name@university.example.'));
const phone = z
	.string()
	.trim()
	.max(40, 'At most 40 characters.')
	.default('')
	.refine(
		(text) => text === '' || /^\+?[\d\s().\/-]{5,}$/.test(text),
		'Write digits, such as +351 21 000 00 00.'
	);

/** A name of an IANA time zone; a near miss is told what was probably meant. */
const zoneField = z
	.string()
	.trim()
	.superRefine((zone, context) => {
		if (isValidZone(zone)) return;
		const near = suggestZone(zone);
		const remedy = near
			? `Did you mean ${near}?`
			: 'Write it as Continent/City, such as Europe/Lisbon.';
		context.addIssue({ code: 'custom', message: `There is no time zone of this name. ${remedy}` });
	});

export const labSchema = z.object({
	name: line('the lab’s name'),
	zone: zoneField,
	address: lines(300),
	phone,
	email: z.union([z.literal(''), emailField]).default('')
});
export type LabFacts = z.infer<typeof labSchema>;

/** The first steward and their lab, on an empty database. */
export const setupSchema = z.object({
	personName: line('your name'),
	personEmail: emailField,
	name: line('the lab’s name'),
	zone: zoneField,
	address: lines(300),
	phone
});

export const roomSchema = z.object({ name: line('the room’s name'), directions: lines(500) });

const hoursText = z
	.string()
	.max(500, 'At most 500 characters.')
	.default('')
	.superRefine((text, context) => {
		const found = parseWeeklyHours(text);
		if (found.ok) return;
		for (const fault of found.faults) {
			context.addIssue({ code: 'custom', message: explainHoursFault(fault) });
		}
	});
export const hoursSchema = z.object({ hours: hoursText });

const variableLimits = z
	.string()
	.max(2000, 'At most 2000 characters.')
	.default('')
	.superRefine((text, context) => {
		const found = parseVariableLimits(text);
		if (found.ok) return;
		for (const { line: number, message } of found.faults) {
			context.addIssue({ code: 'custom', message: `Line ${number}: ${message}` });
		}
	});

export const rigSchema = z
	.object({
		name: line('the rig’s name', 40),
		roomId: z.uuid('Choose the room it stands in.'),
		isPowered: z.boolean().default(false),
		minutesPerVisit: z
			.number({ error: 'Write minutes.' })
			.int('Whole minutes.')
			.min(1, 'At least 1 minute.')
			.max(600, 'At most 600 minutes, ten hours.')
			.default(90),
		trialsPerVisit: z
			.number({ error: 'Write a number of trials.' })
			.int('Whole trials.')
			.min(1, 'At least 1 trial.')
			.max(20_000, 'At most 20,000 trials.')
			.default(1000),
		variableMax: variableLimits,
		shiftMax: z
			.number()
			.positive('A number above zero, or leave it empty.')
			.nullable()
			.default(null),
		penaltyShareMax: z
			.number()
			.gt(0, 'A share above 0, or leave it empty.')
			.max(1, 'A share from 0 to 1.')
			.nullable()
			.default(null),
		limitsChecked: z.boolean().default(false)
	})
	.superRefine((rig, context) => {
		if (!rig.isPowered) return;
		if (rig.variableMax.trim() === '') {
			context.addIssue({
				code: 'custom',
				path: ['variableMax'],
				message: 'A powered rig needs at least one largest value, such as its force or speed.'
			});
		}
		if (!rig.limitsChecked) {
			context.addIssue({
				code: 'custom',
				path: ['limitsChecked'],
				message: 'Have the limits checked on the rig first, then tick this.'
			});
		}
	});
export type RigFacts = z.infer<typeof rigSchema>;

export const rigKeySchema = z.object({
	publicKey: z
		.string()
		.trim()
		.max(4000, 'At most 4000 characters.')
		.superRefine((text, context) => {
			const found = readRigKey(text);
			if (!found.ok) context.addIssue({ code: 'custom', message: rigKeyFaults[found.reason] });
		})
});

export const staffSchema = z.object({
	name: line('their name'),
	personId: z.union([z.literal(''), z.uuid()]).default(''),
	hours: hoursText
});

export const holidaysSchema = z.object({
	lines: z
		.string()
		.trim()
		.min(1, 'Write at least one day.')
		.max(5000, 'At most 5000 characters.')
		.superRefine((text, context) => {
			const found = parseHolidayLines(text);
			if (found.ok) return;
			for (const { line: number, message } of found.faults) {
				context.addIssue({ code: 'custom', message: `Line ${number}: ${message}` });
			}
		})
});

/** Names one row of a list in a form with a single button. */
export const rowSchema = z.object({ id: z.uuid() });
