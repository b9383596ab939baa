import { and, asc, eq, isNotNull, ne } from 'drizzle-orm';
import { describeBaseline, type MatchTraits } from '$scheduler/policies/yoking/match-people';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { createTask } from '$scheduler/tasks/create-task';
import { createScaledTask } from '$scheduler/tasks/scaled-task';
import { taskRecordSchema } from '$scheduler/tasks/task-record';
import { computeCovariance, computeMean } from '$scheduler/variability/moments';
import type { Queryable } from '$lib/server/db/client';
import { block, participant, protocolVersion, trial } from '$lib/server/db/schema';

export type Baseline = { id: string; code: string; traits: MatchTraits };

/**
 * Traits of every baseline of a study that passed and can be told: those of withdrawn people count for
 * the spread no more than they can be masters.
 */
export async function loadBaselines(db: Queryable, studyId: string): Promise<Baseline[]> {
	const people = await db
		.select({ id: participant.id, code: participant.code, content: protocolVersion.content })
		.from(participant)
		.innerJoin(protocolVersion, eq(protocolVersion.id, participant.protocolVersionId))
		.where(
			and(
				eq(participant.studyId, studyId),
				isNotNull(participant.baselinePassedAt),
				ne(participant.state, 'withdrawn')
			)
		)
		.orderBy(asc(participant.code));
	const baselines: Baseline[] = [];
	for (const { id, code, content } of people) {
		const traits = await readTraits(db, id, content);
		if (traits) baselines.push({ id, code, traits });
	}
	return baselines;
}

async function readTraits(
	db: Queryable,
	participantId: string,
	content: ProtocolContent
): Promise<MatchTraits | null> {
	const task = createScaledTask(createTask(taskRecordSchema.parse(content.task)));
	const isBaseline = new Set(
		content.visits.flatMap((visit) =>
			visit.blocks
				.filter(({ purpose }) => purpose === 'baseline')
				.map(({ number }) => `${visit.number}.${number}`)
		)
	);
	const rows = await db
		.select({
			visitNumber: block.visitNumber,
			blockNumber: block.blockNumber,
			execution: trial.execution
		})
		.from(trial)
		.innerJoin(block, eq(block.id, trial.blockId))
		.where(eq(block.participantId, participantId))
		.orderBy(asc(block.visitNumber), asc(block.blockNumber), asc(trial.number));
	const points = rows
		.filter(({ visitNumber, blockNumber }) => isBaseline.has(`${visitNumber}.${blockNumber}`))
		.map(({ execution }) => execution)
		.filter((execution): execution is number[] => execution.every((value) => value !== null))
		.map((execution) => task.toScaled(execution));
	if (points.length <= task.variableCount) return null;
	const errors = points.map((point) => Math.abs(task.evaluate(point))).filter(Number.isFinite);
	if (errors.length === 0) return null;
	const meanError = computeMean(errors);
	const described = describeBaseline({ covariance: computeCovariance(points), meanError });
	return described.ok ? described.traits : null;
}
