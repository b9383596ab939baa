import { z } from 'zod';
import { listArmBurdens } from '../../design/burden.ts';
import { checkDesign } from '../../design/check-design.ts';
import { designSchema } from '../../design/design.ts';
import { FINDING_CODES } from '../../design/finding.ts';
import { command, type CommandGroup } from '../command.ts';

/** An exported protocol as it is, or its content alone. */
const protocolSchema = z.union([
	z.looseObject({ content: z.looseObject({ arms: z.array(z.unknown()) }) }),
	z.looseObject({ arms: z.array(z.unknown()) })
]);

const inputSchema = z.union([
	z.strictObject({
		protocol: protocolSchema,
		/** What the rigs of the lab allow; left out: only the protocol's own limits count. */
		rigs: z
			.array(
				z.strictObject({
					name: z.string(),
					minutesPerVisit: z.number(),
					trialsPerVisit: z.number()
				})
			)
			.default([])
	}),
	protocolSchema
]);

const findingSchema = z.strictObject({
	key: z.string(),
	code: z.enum(FINDING_CODES),
	place: z.looseObject({}),
	field: z.string(),
	numbers: z.looseObject({}),
	severity: z.enum(['serious', 'minor']),
	text: z.string(),
	repair: z.looseObject({ label: z.string() }).optional(),
	/** Why it stays, as the protocol says; null: it keeps the protocol from being frozen. */
	justification: z.string().nullable()
});

const outputSchema = z.strictObject({
	findings: z.array(findingSchema),
	open: z.number().int().describe('findings that are neither mended nor justified'),
	burden: z.array(
		z.strictObject({
			arm: z.string(),
			visits: z.number().int(),
			trials: z.number().int(),
			rigHours: z.number(),
			personHours: z.number(),
			spanDays: z.looseObject({})
		})
	)
});

function judge(given: z.output<typeof inputSchema>) {
	const isWrapped = 'protocol' in given;
	const protocol = protocolSchema.parse(isWrapped ? given.protocol : given);
	const content = 'content' in protocol ? protocol.content : protocol;
	const rigs = isWrapped && Array.isArray(given.rigs) ? given.rigs : [];
	const design = designSchema.parse(content);
	const reasons = z.record(z.string(), z.string()).safeParse(design['justifications']).data ?? {};
	const findings = checkDesign(design, { rigs }).map((finding) => ({
		...finding,
		justification: reasons[finding.key] ?? null
	}));
	return {
		findings,
		open: findings.filter(({ justification }) => justification === null).length,
		burden: listArmBurdens(design).map(({ arm, visits, ...burden }) => ({
			...burden,
			arm: arm.key,
			visits: visits.length
		}))
	};
}

export const DESIGN_COMMANDS: CommandGroup = {
	'check-design': command(
		'what must be mended or justified in a protocol before it is frozen, and what it asks of people',
		{ input: inputSchema, output: outputSchema },
		judge
	)
};
