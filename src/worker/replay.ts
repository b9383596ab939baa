import { asc, eq } from 'drizzle-orm';
import { config } from '$lib/server/config';
import { openDatabase } from '$lib/server/db/client';
import { study } from '$lib/server/db/schema';
import { replayAllDecisions } from '$lib/server/decisions/replay-all-decisions';

/** Replays every stored decision, of one study when its id is given; 1 when any differs. */
const wanted = process.argv[2];
const database = openDatabase(config().DATABASE_URL, { max: 2 });
const studies = await database.db
	.select({ id: study.id, prefix: study.codePrefix })
	.from(study)
	.where(wanted ? eq(study.id, wanted) : undefined)
	.orderBy(asc(study.createdAt));
let differs = false;
for (const { id, prefix } of studies) {
	const { decisionCount, equalCount, different } = await replayAllDecisions(database.db, id);
	console.log(
		`Study ${prefix} (${id}): ${equalCount} of ${decisionCount} decisions replay to the same bytes.`
	);
	for (const row of different) {
		differs = true;
		console.log(
			`  ${row.code}, visit ${row.visitNumber}, block ${row.blockNumber}: ${row.cause}, ${row.name}: recorded ${row.stored}, now ${row.recomputed}`
		);
	}
}
if (studies.length === 0) console.log('There is no study to replay.');
await database.end();
process.exit(differs ? 1 : 0);
