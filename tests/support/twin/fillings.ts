import type postgres from 'postgres';
import type { Entry } from './list-entries';
import type { Filling } from './ask-everything';

type Links = readonly Filling[];

export const unknownLink: Filling = { says: 'unknown', values: { token: 'x'.repeat(43) } };

/** Later visits look like the earlier ones and only take time. */
const lastVisit = 3;

/**
 * What the names in the addresses stand for in one study: its people, visits, blocks, decisions and
 * mailed links, in order of study code.
 *
 * @throws {RangeError} an address with a name that nothing is known of: add it here
 */
export async function loadFillings(sql: postgres.Sql, studyId: string, links: Links) {
	const [home] = await sql<{ labId: string }[]>`
		select lab_id as "labId" from study where id = ${studyId}`;
	const base = { studyId, labId: home?.labId ?? '' };
	const people = await sql<{ code: string; participantId: string }[]>`
		select code, id as "participantId" from participant
		where study_id = ${studyId} order by code`;
	const visits = await sql<Record<string, string>[]>`
		select p.code || ' visit ' || k.visit_number as says, k.id as "bookingId",
			k.participant_id as "participantId"
		from booking k join participant p on p.id = k.participant_id
		where k.study_id = ${studyId} and k.visit_number <= ${lastVisit}
		order by p.code, k.visit_number, k.created_at, k.id`;
	const decisions = await sql<Record<string, string>[]>`
		select p.code || ' visit ' || d.visit_number || ' block ' || d.block_number as says,
			d.id as "decisionId"
		from decision d join participant p on p.id = d.participant_id
		where d.study_id = ${studyId} order by p.code, d.visit_number, d.block_number`;
	const rigs = await sql<{ name: string; rigId: string }[]>`
		select name, id as "rigId" from rig where lab_id = ${base.labId} order by name`;
	const staff = await sql<{ name: string; staffId: string }[]>`
		select name, id as "staffId" from staff where lab_id = ${base.labId} order by name`;
	const tasks = await sql<Record<string, string>[]>`
		select name || ' ' || version as says, id as "taskId" from task
		where lab_id = ${base.labId} order by name, version`;
	const letters = await sql<Record<string, string>[]>`
		select file_name as says, id as "letterId" from ethics_letter
		where study_id = ${studyId} order by file_name, id`;
	const named = (rows: readonly Record<string, string>[], key: string): Filling[] =>
		rows.map(({ [key]: says = '', ...values }) => ({ says, values: { ...base, ...values } }));
	const sets: [string[], Filling[]][] = [
		[[], [{ says: '', values: base }]],
		[['participantId'], named(people, 'code')],
		[['bookingId'], named(visits, 'says')],
		[['bookingId', 'blockNumber'], perBlock(named(visits, 'says'))],
		[['bookingId', 'participantId'], named(visits, 'says')],
		[['decisionId'], named(decisions, 'says')],
		[['rigId'], named(rigs, 'name')],
		[['staffId'], named(staff, 'name')],
		[['letterId'], named(letters, 'says')],
		[['taskId'], named(tasks, 'says')],
		[['token'], links.map(({ says, values }) => ({ says, values: { ...base, ...values } }))]
	];
	return (entry: Entry): readonly Filling[] => {
		if (entry.params.includes('token') && entry.guard !== 'link') return [unknownLink];
		const wanted = entry.params.filter((name) => !(name in base)).sort();
		const found = sets.find(([names]) => names.sort().join() === wanted.join());
		if (found) return found[1];
		throw new RangeError(`say what [${wanted.join('], [')}] of ${entry.path} stand for`);
	};
}

function perBlock(visits: readonly Filling[]): Filling[] {
	return visits.flatMap(({ says, values }) =>
		['1', '2'].map((blockNumber) => ({
			says: `${says} block ${blockNumber}`,
			values: { ...values, blockNumber }
		}))
	);
}
