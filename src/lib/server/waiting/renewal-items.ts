import { startOfLocalDate } from '$lib/time/start-of-local-day';
import type { WaitingItem } from '$lib/waiting/waiting-item';
import type { Grant } from '$lib/server/access/require-permission';
import {
	loadAmendedVersions,
	loadAmendmentPlan,
	type AmendedVersion
} from '$lib/server/amendments/load-amendments';
import { loadFollowers, type FollowerRow } from '$lib/server/amendments/load-followers';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { personHref } from './person-items';

type Context = { studyId: string; zone: string };

/** Who must consent anew because of an amendment, by the newest one that asks for it. */
export async function listRenewalItems(
	db: Queryable,
	clock: Clock,
	grant: Grant<'today:read' | 'participant:list'>,
	zone: string
): Promise<WaitingItem[]> {
	const { studyId } = grant;
	const versions = await loadAmendedVersions(db, studyId);
	const newest = versions.findLast(({ terms }) => terms !== null && terms.renewal !== 'nobody');
	if (!newest) return [];
	const plan = await loadAmendmentPlan(db, clock, { studyId, number: newest.number });
	if (!plan) return [];
	const people = await loadFollowers(db, clock, plan, { studyId });
	return people
		.filter((row) => owes(row, newest))
		.map((row) => toItem(row, newest, { studyId, zone }));
}

/** Consent texts of amendments: who signed one of them early owes nothing to their older version. */
export async function loadComingTexts(db: Queryable, studyId: string): Promise<Set<string>> {
	const versions = await loadAmendedVersions(db, studyId);
	const amended = versions.filter(({ terms }) => terms !== null);
	return new Set(amended.map(({ content }) => content.consentTextVersion));
}

function owes({ state, signedAtMs }: FollowerRow, { terms }: AmendedVersion): boolean {
	if (signedAtMs !== null) return false;
	if (state === 'needs-consent' || state === 'stopped') return true;
	return terms?.renewal === 'everybody' && state === 'chain-differs';
}

function toItem(row: FollowerRow, version: AmendedVersion, context: Context): WaitingItem {
	const { number, content, terms } = version;
	const isStopped = row.state === 'stopped';
	const effectiveOn = terms?.effectiveOn ?? '';
	const byDate = effectiveOn === '' ? null : startOfLocalDate(effectiveOn, context.zone);
	const stops = terms?.withoutRenewal === 'stops';
	return {
		key: `renew-consent ${row.participantId}`,
		kind: 'renew-consent',
		participantId: row.participantId,
		tone: isStopped ? 'rose' : 'amber',
		title: `${row.code} must consent anew`,
		what: `Version ${number} asks for consent text ${content.consentTextVersion}; it takes effect on ${effectiveOn}.`,
		ifNothing: isStopped
			? 'Nothing is booked, told or issued for them.'
			: stops
				? 'From that day on nothing is booked, told or issued for them.'
				: `They stay on version ${row.versionNumber}.`,
		byMs: row.nextVisitMs ?? byDate,
		byText: null,
		act: { label: 'Record consent', href: `${personHref(context, row.participantId)}#consent` }
	};
}
