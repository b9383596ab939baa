import { and, desc, eq, isNotNull, isNull } from 'drizzle-orm';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import {
	allocationSeal,
	amendment,
	ethicsApproval,
	lab,
	protocolVersion,
	signOff,
	study,
	type StudyRole
} from '$lib/server/db/schema';
import { isPaused } from '$lib/server/pauses/is-paused';
import { localDateOf } from '$lib/time/wall-clock';

export type RunningVersion = {
	id: string;
	number: number;
	hash: string;
	content: ProtocolContent;
};

export type GateCode =
	| 'not-frozen'
	| 'not-signed'
	| 'no-approval'
	| 'approval-expired'
	| 'not-sealed'
	| 'not-yet-effective'
	| 'consent-renewal'
	| 'paused'
	| 'closed';

export type MissingGate = {
	code: GateCode;
	/** One sentence for the page: what is missing. */
	text: string;
	/** The role whose step it is. */
	whose: StudyRole;
};

type Standing = RunningVersion & {
	isSigned: boolean;
	isSealed: boolean;
	/** Last day of the longest approval that names the hash; null without one. */
	approvedUntil: string | null;
	/** First day on which an amendment may act; null where nothing is declared. */
	effectiveOn: string | null;
};

/**
 * The version the study runs by: the newest frozen one whose hash the statistician's latest word on
 * it signs, an ethics approval names and a seal holds, once its effective date has come. Null while
 * there is none.
 *
 * An approval that has expired, a pause or the end of the study close gates (`findMissingGates`),
 * but do not change which version runs.
 */
export async function loadRunningVersion(
	db: Queryable,
	clock: Clock,
	studyId: string
): Promise<RunningVersion | null> {
	const today = localDateOf(clock.now(), (await loadHome(db, studyId)).zone);
	const standings = await loadStandings(db, studyId);
	const running = standings.find(
		(standing) => isComplete(standing) && isEffective(standing, today)
	);
	if (!running) return null;
	const { id, number, hash, content } = running;
	return { id, number, hash, content };
}

/**
 * What still keeps enrolment, booking, invitations and the issue of blocks shut, each with whose
 * step it is; empty when all of them are open. Of the seal it says only whether there is one.
 */
export async function findMissingGates(
	db: Queryable,
	clock: Clock,
	studyId: string
): Promise<MissingGate[]> {
	const found = await loadHome(db, studyId);
	const standings = await loadStandings(db, studyId);
	const today = localDateOf(clock.now(), found.zone);
	const complete = standings.filter(isComplete);
	const running = complete.find((standing) => isEffective(standing, today));
	const missing = findMissingSteps(running ?? complete[0] ?? standings[0], today);
	if (await isPaused(db, studyId)) missing.push(gateOf('paused'));
	if (found.closedAt) missing.push(gateOf('closed'));
	return missing;
}

async function loadHome(db: Queryable, studyId: string) {
	const [found] = await db
		.select({ closedAt: study.closedAt, zone: lab.zone })
		.from(study)
		.innerJoin(lab, eq(lab.id, study.labId))
		.where(eq(study.id, studyId));
	if (!found) throw new RangeError('a study that exists is required');
	return found;
}

function isEffective({ effectiveOn }: Standing, today: string): boolean {
	return effectiveOn === null || effectiveOn <= today;
}

function isComplete(standing: Standing): boolean {
	return standing.isSigned && standing.isSealed && standing.approvedUntil !== null;
}

function findMissingSteps(standing: Standing | undefined, today: string): MissingGate[] {
	if (!standing) return [gateOf('not-frozen')];
	const { number, approvedUntil } = standing;
	const missing: MissingGate[] = [];
	if (!standing.isSigned) missing.push(gateOf('not-signed', { number }));
	if (approvedUntil === null) missing.push(gateOf('no-approval', { number }));
	else if (approvedUntil < today) missing.push(gateOf('approval-expired', { day: approvedUntil }));
	if (!standing.isSealed) missing.push(gateOf('not-sealed', { number }));
	if (!isEffective(standing, today)) {
		missing.push(gateOf('not-yet-effective', { number, day: standing.effectiveOn ?? '' }));
	}
	return missing;
}

function gateOf(code: GateCode, { number = 0, day = '' } = {}): MissingGate {
	const words: Record<GateCode, [string, StudyRole]> = {
		'not-frozen': ['No version of the protocol is frozen yet.', 'investigator'],
		'not-signed': [`The statistician has not signed off version ${number}.`, 'statistician'],
		'no-approval': [`No ethics approval names version ${number}.`, 'investigator'],
		'approval-expired': [
			`The ethics approval ended on ${day}; record its renewal.`,
			'investigator'
		],
		'not-sealed': [
			`The allocation of version ${number} is not sealed yet.`,
			'unblinded-statistician'
		],
		'consent-renewal': ['The amendment stops people until they consent anew.', 'coordinator'],
		'not-yet-effective': [`Version ${number} takes effect on ${day}.`, 'investigator'],
		paused: ['The study is paused; two different people lift the pause.', 'investigator'],
		closed: ['The study is closed.', 'investigator']
	};
	const [text, whose] = words[code];
	return { code, text, whose };
}

/** Every frozen version with what has been given for its hash, newest first. */
async function loadStandings(db: Queryable, studyId: string): Promise<Standing[]> {
	const versions = await db
		.select({ version: protocolVersion, effectiveOn: amendment.effectiveOn })
		.from(protocolVersion)
		.leftJoin(amendment, eq(amendment.protocolVersionId, protocolVersion.id))
		.where(and(eq(protocolVersion.studyId, studyId), isNotNull(protocolVersion.hash)))
		.orderBy(desc(protocolVersion.number));
	const verdicts = await loadVerdicts(db, studyId);
	const approvals = await loadApprovals(db, studyId);
	const seals = await db
		.select({ hash: allocationSeal.protocolHash })
		.from(allocationSeal)
		.where(eq(allocationSeal.studyId, studyId));
	const sealed = new Set(seals.map((seal) => seal.hash));
	return versions.flatMap(({ version: { id, number, hash, content }, effectiveOn }) => {
		if (hash === null) return [];
		const isSigned = verdicts.get(hash) === 'signed';
		const approvedUntil = approvals.get(hash) ?? null;
		const isSealed = sealed.has(hash);
		return [{ id, number, hash, content, isSigned, isSealed, approvedUntil, effectiveOn }];
	});
}

/** The latest verdict on each hash. */
async function loadVerdicts(db: Queryable, studyId: string) {
	const rows = await db
		.select({ hash: signOff.protocolHash, verdict: signOff.verdict })
		.from(signOff)
		.where(eq(signOff.studyId, studyId))
		.orderBy(signOff.at);
	return new Map(rows.map((row) => [row.hash, row.verdict]));
}

/** The last day of approval of each hash. */
async function loadApprovals(db: Queryable, studyId: string) {
	const rows = await db
		.select({ hash: ethicsApproval.protocolHash, expiresOn: ethicsApproval.expiresOn })
		.from(ethicsApproval)
		.where(and(eq(ethicsApproval.studyId, studyId), isNull(ethicsApproval.revokedAt)))
		.orderBy(ethicsApproval.expiresOn);
	return new Map(rows.map((row) => [row.hash, row.expiresOn]));
}
