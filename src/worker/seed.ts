import { randomBytes, createHash } from 'node:crypto';
import { config, ownerConfig } from '$lib/server/config';
import { openDatabase } from '$lib/server/db/client';
import { loadInstance, type InstanceKind } from '$lib/server/instance/load-instance';
import { instance, lab, setupLink } from '$lib/server/db/schema';

/** Marks a database as demo, rehearsal or own at its first start, and prints what to do next. */
const kinds: Record<string, InstanceKind> = {
	'--demo': 'demo',
	'--rehearse': 'rehearsal',
	'--empty': 'own'
};
const kind = kinds[process.argv[2] ?? '--empty'];
if (!kind) throw new Error(`unknown option ${process.argv[2]}; use --demo, --rehearse or --empty`);
const database = openDatabase(ownerConfig().OVALRY_OWNER_URL, { max: 2 });
try {
	const { db } = database;
	if (!(await loadInstance(db))) await db.insert(instance).values({ kind });
	const labs = await db.select({ id: lab.id }).from(lab);
	if (labs.length === 0 && kind !== 'demo') {
		const token = randomBytes(32).toString('base64url');
		const tokenHash = createHash('sha256').update(token).digest();
		await db.insert(setupLink).values({ tokenHash, expiresAt: new Date(Date.now() + 30 * 60_000) });
		console.log(JSON.stringify({ setupLink: `${config().ORIGIN}/setup/${token}` }));
	}
} finally {
	await database.end();
}
