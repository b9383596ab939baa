import { exportJWK, generateKeyPair } from 'jose';
import { mkdir, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import {
	holiday,
	lab,
	membership,
	person,
	rig,
	room,
	staff,
	weeklyHours
} from '$lib/server/db/schema';
import type { DemoWorld } from './demo-world';
import { demoZone } from './demo-time';
import { emailOf, team } from './cast';

const weekdays = [1, 2, 3, 4, 5];

/** The invented lab: two rigs in two rooms, two people to run them, weekdays from nine to half past five. */
export async function buildLab(world: DemoWorld): Promise<{ labId: string }> {
	const { db } = world;
	const [made] = await db
		.insert(lab)
		.values({
			name: 'Tidewater Movement Lab',
			zone: demoZone,
			address: 'Building 4, second floor, 1 Invented Quay',
			phone: '+351 555 0100',
			email: 'lab@tidewater.example'
		})
		.returning({ id: lab.id });
	if (!made) throw new Error('the lab was not stored');
	await addTeam(world, made.id);
	for (const name of ['Gull', 'Heron']) await addRig(world, made.id, name);
	for (const name of ['Otto Sample', 'Nell Notional']) await addStaff(world, made.id, name);
	await db.insert(holiday).values({ labId: made.id, on: '2027-03-26', name: 'Good Friday' });
	return { labId: made.id };
}

async function addTeam({ db, people, clock }: DemoWorld, labId: string): Promise<void> {
	const now = new Date(clock.now());
	for (const { key, name, role } of team) {
		const email = emailOf(key);
		const [row] = await db
			.insert(person)
			.values({ name, email, emailVerified: now })
			.returning({ id: person.id });
		if (!row) throw new Error('a person was not stored');
		people.set(key, { id: row.id, name, email });
		const isSteward = role === 'steward';
		await db
			.insert(membership)
			.values({ labId, personId: row.id, isSteward, since: now, acceptedAt: now });
	}
}

/** A rig with its key pair; the private half goes where a demo rig would keep it. */
async function addRig({ db, settings }: DemoWorld, labId: string, name: string): Promise<void> {
	const [place] = await db
		.insert(room)
		.values({ labId, name: `${name} room`, directions: 'Second floor, left of the stairs' })
		.returning({ id: room.id });
	const pair = await generateKeyPair('ECDH-ES', { crv: 'P-256', extractable: true });
	const folder = join(settings.OVALRY_KEYS, 'demo-rigs');
	await mkdir(folder, { recursive: true, mode: 0o700 });
	const privateKey = JSON.stringify(await exportJWK(pair.privateKey));
	await writeFile(join(folder, `${name.toLowerCase()}-private.json`), privateKey, { mode: 0o600 });
	const limits = { isPowered: false, minutesPerVisit: 90, trialsPerVisit: 300, variableMax: {} };
	const publicKey = { ...(await exportJWK(pair.publicKey)) };
	const [made] = await db
		.insert(rig)
		.values({ labId, roomId: place?.id ?? '', name, limits, publicKey })
		.returning({ id: rig.id });
	await db.insert(weeklyHours).values(
		weekdays.map((weekday) => ({
			...{ labId, rigId: made?.id ?? '', weekday, opensMinute: 9 * 60, closesMinute: 17 * 60 + 30 }
		}))
	);
}

async function addStaff({ db, people }: DemoWorld, labId: string, name: string): Promise<void> {
	const own = [...people.values()].find((member) => member.name === name);
	const [made] = await db
		.insert(staff)
		.values({ labId, name, personId: own?.id ?? null })
		.returning({ id: staff.id });
	await db.insert(weeklyHours).values(
		weekdays.map((weekday) => ({
			...{
				labId,
				staffId: made?.id ?? '',
				weekday,
				opensMinute: 9 * 60,
				closesMinute: 17 * 60 + 30
			}
		}))
	);
}
