import { and, count, eq, min } from 'drizzle-orm';
import { roleWords } from '$lib/waiting/role-words';
import { sortByUrgency, type WaitingItem } from '$lib/waiting/waiting-item';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { decision, type StudyRole } from '$lib/server/db/schema';
import { loadPersonRecords, type PersonRecord } from '$lib/server/people/load-person-records';
import { findMissingGates, type MissingGate } from '$lib/server/studies/load-gates';
import { listApprovalItems } from './approval-items';
import { listBreachItems } from './breach-items';
import { listChainItems, loadLabZone } from './chain-items';
import { loadMessages } from './load-messages';
import { listPersonItems, type ItemContext } from './person-items';
import { listRenewalItems, loadComingTexts } from './renewal-items';
import { findVersionSteps } from './version-steps';

/**
 * What waits for one member of the study, most urgent first: the union over the roles they hold.
 * Nothing in it depends on an arm, and nothing is read that one of the roles may not see.
 */
export async function loadWaiting(
	db: Queryable,
	clock: Clock,
	grant: Grant<'today:read'>
): Promise<WaitingItem[]> {
	const has = (role: StudyRole) => grant.roles.includes(role);
	const gates = await findMissingGates(db, clock, grant.studyId);
	const items = gates.map((gate) => gateItem(grant, gate));
	items.push(...(await findVersionSteps(db, grant, gates)));
	items.push(...(await listApprovalItems(db, clock, grant)));
	items.push(...(await listBreachItems(db, grant)));
	if (has('coordinator')) items.push(...(await loadCoordinatorItems(db, clock, grant)));
	if (has('approver')) items.push(...(await loadHeldDecisions(db, grant)));
	return sortByUrgency(items);
}

/** What waits about the people of the study. */
export async function loadCoordinatorItems(
	db: Queryable,
	clock: Clock,
	grant: Grant<'today:read' | 'participant:list'>,
	given?: readonly PersonRecord[]
): Promise<WaitingItem[]> {
	const records = given ?? (await loadPersonRecords(db, grant));
	const zone = await loadLabZone(db, grant.labId);
	const context: ItemContext = { studyId: grant.studyId, zone, nowMs: clock.now() };
	const failedMails = await loadMessages(db, grant, { states: ['failed', 'unknown'] });
	const renewals = await listRenewalItems(db, clock, grant, zone);
	const newTexts = await loadComingTexts(db, grant.studyId);
	const items = records
		.flatMap((record) =>
			listPersonItems(record, { failedMails }, context).filter(
				({ kind }) => kind !== 'consent' || !newTexts.has(record.person.consent?.textVersion ?? '')
			)
		)
		.concat(renewals);
	const chains = await listChainItems(db, grant, records, context);
	// A missed visit is why its chain breaks: one item says both.
	const missed = new Set(
		items.flatMap(({ kind, participantId }) => (kind === 'missed' ? [participantId] : []))
	);
	return [...items, ...chains.filter(({ participantId }) => !missed.has(participantId))];
}

const gateActs: Partial<Record<MissingGate['code'], { label: string; path: string }>> = {
	'not-frozen': { label: 'Open the protocol', path: 'protocol' },
	'not-signed': { label: 'Open the power report', path: 'power' },
	'no-approval': { label: 'Record the approval', path: 'protocol' },
	'approval-expired': { label: 'Record the renewal', path: 'protocol' },
	'not-sealed': { label: 'Seal the allocation', path: 'allocation' }
};

function gateItem(grant: Grant<'today:read'>, gate: MissingGate): WaitingItem {
	const isMine = grant.roles.includes(gate.whose);
	const act = isMine ? gateActs[gate.code] : undefined;
	const whose = isMine ? 'This step is yours.' : `This is the step of ${roleWords[gate.whose]}.`;
	return {
		key: `gate ${gate.code}`,
		kind: 'gate',
		participantId: null,
		tone: isMine || gate.code === 'paused' ? 'rose' : 'amber',
		title: gate.text.replace(/\.$/, ''),
		what: whose,
		ifNothing: 'Nobody can be enrolled, booked or invited, and no block is issued.',
		byMs: null,
		byText: 'before anybody comes',
		act: act ? { label: act.label, href: `/studies/${grant.studyId}/${act.path}` } : null
	};
}

/** How many decisions are held and by when the first falls back; never whose or what. */
async function loadHeldDecisions(
	db: Queryable,
	grant: Grant<'today:read'>
): Promise<WaitingItem[]> {
	const [row] = await db
		.select({ heldCount: count(), firstReadyAt: min(decision.readyAt) })
		.from(decision)
		.where(and(eq(decision.studyId, grant.studyId), eq(decision.state, 'held')));
	const heldCount = row?.heldCount ?? 0;
	if (heldCount === 0) return [];
	return [
		{
			key: 'held-decisions',
			kind: 'held-decisions',
			participantId: null,
			tone: 'rose',
			title:
				heldCount === 1 ? '1 decision is held for you' : `${heldCount} decisions are held for you`,
			what: 'Each is outside the guard rails, or could not be placed by the rule alone.',
			ifNothing: 'At its hour the declared fallback is issued and recorded.',
			byMs: row?.firstReadyAt?.getTime() ?? null,
			byText: row?.firstReadyAt ? null : 'before the next visit',
			act: { label: 'Settle them', href: `/studies/${grant.studyId}/decisions` }
		}
	];
}
