import type postgres from 'postgres';
import type { Item, Level } from '$lib/server/access/visibility';
import { openAllocation } from '$lib/server/keys/allocation-seal';
import type { Played } from './played-study';

/** A text that stands for a hidden value, found nowhere else. */
export type Plant = {
	what: string;
	text: string;
	item: Item;
	/** Levels of the visibility table at which the value itself is shown. */
	levels: Level[];
	/** Whether a page shows it to those who may see it: then the search is known to find it. */
	isShown: boolean;
};

/** Puts a text that can be searched for in the place of each hidden value of a played study. */
export async function plantValues(sql: postgres.Sql, { world, studyId }: Played): Promise<Plant[]> {
	await sql`set session_replication_role = replica`;
	await sql`update allocation set arm = 'zq-arm' where participant_id =
		(select id from participant where code = 'TW-001')`;
	await sql`update decision set code = 'ZQ-CODE' where id in (select id from decision
		order by decided_at desc, id limit 1)`;
	await sql`update decision set kind = 'zq-kind' where id in (select id from decision
		order by decided_at desc, id offset 1 limit 1)`;
	await sql`update settlement set reason = 'zq reason of the approver'`;
	await sql`update allocation_seal
		set method = jsonb_set(method, '{blockSizes}', '[2, 997413579]')`;
	await sql`update trial set execution[1] = 2.4861234567891`;
	await plantNote(sql, world);
	const read = async (query: postgres.PendingQuery<{ text: string }[]>) =>
		(await query)[0]?.text ?? 'nothing to search for';
	const secret = await readSecret(sql, world.settings.OVALRY_ALLOCATION_KEY, studyId);
	const whole: Level[] = ['yes'];
	return [
		plant('arm of a person', 'zq-arm', 'arm', whole),
		plant('reason code of a decision', 'ZQ-CODE', 'decision', whole, true),
		// No kind has this name: whoever may see decisions reads what it stands for instead.
		plant('kind of a decision', 'zq-kind', 'decision', whole),
		plant('reason of a settlement', 'zq reason of the approver', 'decision', whole, true),
		plant(
			'size of a penalized region',
			await read(sql`select substring(output from '"share":(0\\.\\d{6,})') as text
				from decision where output ~ '"share":0\\.\\d{6}' limit 1`),
			'block-parameters',
			whole
		),
		plant(
			'digest of a decision',
			await read(sql`select inputs_digest as text from decision order by decided_at limit 1`),
			'decision',
			whole,
			true
		),
		plant('one trial', '2.4861234567891', 'raw-trials', ['yes', 'masked']),
		plant('address of a person', 'kenji.madeup', 'contact', whole, true),
		plant('full name of a person', 'Kenji Madeup', 'contact', whole, true),
		plant('first name of a person', 'Kenji', 'contact', ['yes', 'first-name'], true),
		plant('note of a person', 'zq note of a person', 'booking', whole),
		plant(
			'study code of a person',
			'TW-004',
			'participant-state',
			[...whole, 'ready', 'masked'],
			true
		),
		plant(
			'block sizes of the allocation',
			'997413579',
			'allocation-method',
			[...whole, 'design'],
			true
		),
		plant('seed of the allocation', secret, 'future-allocation', whole)
	];
}

function plant(what: string, text: string, item: Item, levels: Level[], isShown = false): Plant {
	return { what, text, item, levels, isShown };
}

async function plantNote(sql: postgres.Sql, { keys }: Played['world']): Promise<void> {
	const [visit] = await sql<{ id: string; participantId: string }[]>`
		select id, participant_id as "participantId" from booking
		where state = 'booked' order by lower(during) limit 1`;
	if (!visit) throw new Error('there is no booked visit');
	const sealed = await keys.folder.encrypt(visit.participantId, 'zq note of a person');
	await sql`update booking set answer = 'asks-other-time', answered_at = changed_at,
		answer_note = ${Buffer.from(sealed)} where id = ${visit.id}`;
}

async function readSecret(sql: postgres.Sql, key: string, studyId: string): Promise<string> {
	const [seal] = await sql<{ sealed: Buffer; commitment: string }[]>`
		select sealed_seed as sealed, commitment from allocation_seal where study_id = ${studyId}`;
	if (!seal) throw new Error('nothing is sealed');
	const { seed } = openAllocation(key, studyId, {
		sealed: new Uint8Array(seal.sealed),
		commitment: seal.commitment
	});
	return Buffer.from(seed).toString('hex');
}
