import { config } from '$lib/server/config';
import { openDatabase } from '$lib/server/db/client';
import { verifyChain } from '$lib/server/record/verify-chain';

const explanations = {
	'missing-before': 'the event before it is missing',
	'previous-differs': 'it does not name the hash of the event before it',
	'content-differs': 'its content is not what was hashed'
};

const database = openDatabase(config().DATABASE_URL, { max: 1 });
const verdict = await verifyChain(database.db);
await database.end();
if (verdict.ok) {
	console.log(
		`The record is whole: ${verdict.eventCount} events, last hash ${verdict.lastHash || 'none'}.`
	);
} else {
	console.error(`The record is broken at event ${verdict.seq}: ${explanations[verdict.reason]}.`);
}
process.exit(verdict.ok ? 0 : 1);
