import { listArmBurdens } from '$scheduler/design/burden';
import { designSchema } from '$scheduler/design/design';
import { describeProtocol } from './describe-protocol';
import { describeEnvelope, readEnvelope } from './envelope';
import { readableContent } from './readable-content';
import type { DocumentFacts } from './reporting/document-facts';
import { fillChecklists } from './reporting/fill-checklists';
import { buildScheduleTable } from './schedule-table';

export type BurdenRow = {
	arm: string;
	visits: number;
	trials: number;
	/** Hours that the protocol reserves for the person. */
	plannedHours: number;
	/** Set-up and blocks; null where the length of a trial is not said. */
	personHours: number | null;
	/** Set-up, blocks and clean-up. */
	rigHours: number | null;
	spanDays: { min: number; target: number; max: number };
};

/** Everything that the printed protocol says to a reader of these facts. */
export function printDocument(facts: DocumentFacts) {
	const { content: whole, withRule, ...head } = facts;
	const content = readableContent(whole, { withRule });
	return {
		head,
		parts: describeProtocol(whole, { withRule }),
		schedule: buildScheduleTable(content, { withRule }),
		burdens: listBurdens(content),
		envelope: withRule ? describeEnvelope(readEnvelope(whole)) : null,
		arms: content.arms,
		visits: content.visits,
		peoplePerArm: content.comparison?.peoplePerArm ?? null,
		checklists: fillChecklists(facts)
	};
}

/** What each arm asks of a person. */
export function listBurdens(content: DocumentFacts['content']): BurdenRow[] {
	const isTimed = content.trialSeconds !== undefined;
	return listArmBurdens(designSchema.parse(content)).map((burden) => ({
		arm: burden.arm.name || burden.arm.key,
		visits: burden.visits.length,
		trials: burden.trials,
		plannedHours: burden.visits.reduce((sum, visit) => sum + visit.plannedMinutes, 0) / 60,
		personHours: isTimed ? burden.personHours : null,
		rigHours: isTimed ? burden.rigHours : null,
		spanDays: burden.spanDays
	}));
}
