import { createHash, randomBytes } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { config, ownerConfig } from '$lib/server/config';
import { openDatabase, type Database } from '$lib/server/db/client';
import { emailOf, team } from '$lib/server/demo/seed/cast';
import { demoNowMs } from '$lib/server/demo/seed/demo-time';
import { resetDatabase } from '$lib/server/demo/seed/reset-database';
import { seedDemo } from '$lib/server/demo/seed/seed-demo';
import { instance, lab, setupLink } from '$lib/server/db/schema';
import type { InstanceKind } from '$lib/server/instance/load-instance';

/**
 * Prepares a database at its first start: `--demo` plays the demo study, `--rehearse` leaves a blank
 * lab with a clock that can be moved, `--empty` a blank lab. Prints JSON lines for the start script.
 */
const kinds: Record<string, InstanceKind> = {
	'--demo': 'demo',
	'--rehearse': 'rehearsal',
	'--empty': 'own'
};
const demoSeed = 20270311;
const option = process.argv[2] ?? '--empty';
const kind = kinds[option];
if (!kind) throw new Error(`unknown option ${option}; use --demo, --rehearse or --empty`);

const owner = openDatabase(ownerConfig().OVALRY_OWNER_URL, { max: 2 });
const app = openDatabase(config().DATABASE_URL, { max: 4 });
try {
	if (kind === 'demo') await prepareDemo();
	else await prepareBlank(kind);
} finally {
	await Promise.all([owner.end(), app.end()]);
}

async function prepareDemo(): Promise<void> {
	const [found] = await owner.db.select().from(instance);
	if (found && found.kind !== 'demo')
		throw new Error('This database is no demo: the demo seed leaves it alone.');
	if (found?.seed == null) {
		if (found || (await hasLab(owner.db))) await resetDatabase(owner.db);
		await owner.db.insert(instance).values({ kind: 'demo' });
		await seedDemo({ db: app.db, settings: config(), seed: demoSeed, report: console.error });
		const clockOffsetMs = demoNowMs - Date.now();
		await owner.db
			.update(instance)
			.set({ seed: demoSeed, clockOffsetMs })
			.where(eq(instance.onlyRow, true));
	}
	const people = team.map(({ key, name, role }) => ({ role, name, email: emailOf(key) }));
	console.log(JSON.stringify({ people }));
}

async function prepareBlank(kind: 'rehearsal' | 'own'): Promise<void> {
	const [found] = await owner.db.select().from(instance);
	if (!found) await owner.db.insert(instance).values({ kind });
	if (await hasLab(owner.db)) return;
	const token = randomBytes(32).toString('base64url');
	const tokenHash = createHash('sha256').update(token).digest();
	const expiresAt = new Date(Date.now() + (found?.clockOffsetMs ?? 0) + 30 * 60_000);
	await owner.db.insert(setupLink).values({ tokenHash, expiresAt });
	console.log(JSON.stringify({ setupLink: `${config().ORIGIN}/setup/${token}` }));
}

async function hasLab(db: Database): Promise<boolean> {
	return (await db.select({ id: lab.id }).from(lab).limit(1)).length > 0;
}
