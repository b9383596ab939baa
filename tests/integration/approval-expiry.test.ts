import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { eq } from 'drizzle-orm';
import { beforeEach, describe, expect, it } from 'vitest';
import { emptyCells } from '$lib/people/enrolment-columns';
import type { StudyRole } from '$lib/server/db/schema';
import { bundle, ethicsApproval, participant } from '$lib/server/db/schema';
import { proposeChains } from '$lib/server/bookings/propose-chains';
import { savePlan } from '$lib/server/bookings/save-plan';
import { issueDueBundles } from '$lib/server/bundles/issue-due-bundles';
import { decideDue } from '$lib/server/decisions/decide-due';
import { recordApproval } from '$lib/server/ethics/record-approval';
import { loadSigningKey } from '$lib/server/keys/signing-key';
import { enrolPeople } from '$lib/server/people/enrol-people';
import { loadWaiting } from '$lib/server/waiting/load-waiting';
import { useMailBench } from '../support/mail-bench';
import { plantMember } from '../support/planted-study';
import { createPuckProtocol } from '../support/puck-protocol';
import { hourMs, plantRunningStudy } from '../support/running-study';

/** An approval that ends on 5 March: what it opens until midnight in Lisbon, and no minute longer. */

const { bench, invite, run } = useMailBench();
const lastMinute = Date.parse('2027-03-05T23:59:00Z');
const firstMinute = Date.parse('2027-03-06T00:01:00Z');

beforeEach(() => endOn('2027-03-05'));

async function endOn(expiresOn: string) {
	const ofStudy = eq(ethicsApproval.studyId, bench.home.studyId);
	await bench.owner.db.update(ethicsApproval).set({ expiresOn }).where(ofStudy);
}

async function renew() {
	const investigator = await plantMember(bench.owner.db, bench.home, 'investigator');
	const grant = await investigator.grantFor('ethics:record');
	const recorded = await recordApproval(bench.app.db, bench.clock, grant, {
		protocolHash: bench.home.hash,
		board: 'Board',
		reference: 'E-2',
		approvedOn: '2027-03-01',
		expiresOn: '2027-09-01'
	});
	expect(recorded).toMatchObject({ ok: true });
}

describe('an approval that has ended', () => {
	it('holds invitations back until its renewal is recorded', async () => {
		await invite();
		bench.clock.set(firstMinute);
		await run();
		expect(bench.post.given).toHaveLength(0);
		await renew();
		await run();
		expect(bench.post.given).toHaveLength(1);
	});

	it('lets invitations out to the last minute of its last day', async () => {
		await invite();
		bench.clock.set(lastMinute);
		await run();
		expect(bench.post.given).toHaveLength(1);
	});

	it('enrols nobody', async () => {
		const coordinator = await plantMember(bench.owner.db, bench.home, 'coordinator');
		const grant = await coordinator.grantFor('participant:enrol');
		const enrol = (name: string) =>
			enrolPeople(bench.app.db, bench.clock, grant, {
				keys: bench.keys,
				rows: [{ line: 1, cells: { ...emptyCells, name, email: `${name}@mail.example` } }]
			});
		bench.clock.set(lastMinute);
		expect(await enrol('ines')).toMatchObject({ ok: true });
		bench.clock.set(firstMinute);
		expect(await enrol('olaf')).toMatchObject({
			ok: false,
			reason: 'gates-missing',
			gates: [{ code: 'approval-expired', text: expect.stringContaining('2027-03-05') }]
		});
		await renew();
		expect(await enrol('olaf')).toMatchObject({ ok: true });
	});

	it('books nothing', async () => {
		const coordinator = await plantMember(bench.owner.db, bench.home, 'coordinator');
		const grant = await coordinator.grantFor('booking:change');
		const { participantId } = bench.person;
		const consentedAt = new Date(bench.clock.now());
		const person = eq(participant.id, participantId);
		await bench.owner.db.update(participant).set({ consentedAt }).where(person);
		bench.clock.set(lastMinute);
		const found = await proposeChains(bench.app.db, bench.clock, grant, { participantId });
		if (!found.ok) throw new Error(found.reason);
		const places = (found.chains[0]?.visits ?? []).filter(({ visitNumber }) => visitNumber > 2);
		expect(places.length).toBeGreaterThan(0);
		const { planVersion } = found.plan;
		const input = { participantId, places, planVersion, mail: bench.setting };
		bench.clock.set(firstMinute);
		expect(await savePlan(bench.app.db, bench.clock, grant, input)).toMatchObject({
			ok: false,
			reason: 'gates-missing',
			gates: [{ code: 'approval-expired' }]
		});
		bench.clock.set(lastMinute);
		expect(await savePlan(bench.app.db, bench.clock, grant, input)).toMatchObject({ ok: true });
	});

	it('issues no block', async () => {
		const start = Date.parse('2027-03-06T09:00:00Z');
		let nowMs = start - 13 * hourMs;
		const clock = { now: () => nowMs };
		const study = await plantRunningStudy(bench.owner.db, createPuckProtocol(), nowMs);
		const ofStudy = eq(ethicsApproval.studyId, study.study.id);
		const setEnd = (expiresOn: string) =>
			bench.owner.db.update(ethicsApproval).set({ expiresOn }).where(ofStudy);
		await setEnd('2027-03-05');
		const person = await study.enrol('Q1');
		await study.book(person.id, 1, start);
		const wrappingKey = Buffer.alloc(32, 3).toString('base64url');
		const folder = mkdtempSync(join(tmpdir(), 'ovalry-keys-'));
		const key = await loadSigningKey({ folder, wrappingKey });
		const catchUp = async () => {
			await decideDue(bench.app.db, { clock, allocate: async () => false });
			await issueDueBundles(bench.app.db, { clock, signingKey: async () => key });
			const rows = await bench.owner.db.select().from(bundle);
			return rows.filter(({ studyId }) => studyId === study.study.id).length;
		};
		nowMs = start - hourMs;
		expect(await catchUp()).toBe(0);
		await setEnd('2027-03-06');
		expect(await catchUp()).toBe(1);
	});
});

describe('an approval that ends soon', () => {
	async function warn(role: StudyRole, daysBefore: number) {
		const member = await plantMember(bench.owner.db, bench.home, role);
		bench.clock.set(Date.UTC(2027, 2, 5 - daysBefore, 12));
		const grant = await member.grantFor('today:read');
		const items = await loadWaiting(bench.app.db, bench.clock, grant);
		return items
			.filter(({ kind }) => kind === 'approval-ends')
			.map(({ title, tone, act }) => ({ title, tone, hasAct: act !== null }));
	}

	it('is nothing to say before the sixtieth day', async () => {
		expect(await warn('investigator', 61)).toEqual([]);
	});

	it.each([
		[60, 'plain', 'in 60 days'],
		[31, 'plain', 'in 31 days'],
		[30, 'amber', 'in 30 days'],
		[8, 'amber', 'in 8 days'],
		[7, 'rose', 'in 7 days'],
		[1, 'rose', 'tomorrow'],
		[0, 'rose', 'today']
	] as const)('waits for investigator and coordinator %i days before', async (days, tone, when) => {
		const title = `The ethics approval ends ${when}`;
		expect(await warn('investigator', days)).toEqual([{ title, tone, hasAct: true }]);
		expect(await warn('coordinator', days)).toEqual([{ title, tone, hasAct: false }]);
		expect(await warn('operator', days)).toEqual([]);
	});

	it('gives way to the shut gate once it is over', async () => {
		expect(await warn('investigator', -1)).toEqual([]);
	});
});
