import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { letterMaxBytes } from '$lib/protocol/letter-type';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { ethicsApproval, ethicsLetter, recordEvent } from '$lib/server/db/schema';
import { listApprovals } from '$lib/server/ethics/list-approvals';
import { loadLetter } from '$lib/server/ethics/load-letter';
import { storeLetter } from '$lib/server/ethics/store-letter';
import { sha256Hex } from '$lib/server/record/canonical-json';
import { createDatabase, type TestDatabase } from '../support/create-database';
import {
	createTestClock,
	plantLab,
	plantMember,
	plantStudy,
	type PlantedStudy
} from '../support/planted-study';

let database: TestDatabase;
let owner: DatabaseHandle;
let app: DatabaseHandle;
let home: PlantedStudy;
let approvalId: string;
let investigator: Awaited<ReturnType<typeof plantMember>>;
const clock = createTestClock();
const pdf = new TextEncoder().encode('%PDF-1.7\nletter of the board\n%%EOF\n');

beforeAll(async () => {
	database = await createDatabase();
	owner = openDatabase(database.ownerUrl);
	app = openDatabase(database.appUrl);
	const lab = await plantLab(owner.db);
	home = await plantStudy(owner.db, lab);
	investigator = await plantMember(owner.db, home, 'investigator');
	const [row] = await owner.db.select({ id: ethicsApproval.id }).from(ethicsApproval);
	approvalId = row?.id ?? '';
});
afterAll(async () => {
	await app.end();
	await owner.end();
	await database.drop();
});

async function keep(content: Uint8Array, change: { approvalId?: string; fileName?: string } = {}) {
	const grant = await investigator.grantFor('ethics:record');
	const input = { approvalId, fileName: 'letter.pdf', content, ...change };
	return storeLetter(app.db, clock, grant, input);
}

describe('the scanned letter of an approval', () => {
	it('is kept once, with its checksum, and comes back byte for byte', async () => {
		const sha256 = sha256Hex(pdf);
		const fileName = 'C:\\scans\\board "final".pdf';
		expect(await keep(pdf, { fileName })).toEqual({ ok: true, sha256 });
		expect(await keep(pdf)).toEqual({ ok: false, reason: 'kept-already' });
		const read = await investigator.grantFor('protocol:read');
		const [approval] = await listApprovals(app.db, clock, read);
		expect(approval?.letters).toMatchObject([
			{ fileName: 'board final.pdf', byteCount: pdf.length, sha256 }
		]);
		const grant = await investigator.grantFor('ethics:read');
		const letter = await loadLetter(app.db, grant, approval?.letters[0]?.id ?? '');
		expect(Buffer.from(letter?.content ?? []).equals(Buffer.from(pdf))).toBe(true);
		expect(letter?.mediaType).toBe('application/pdf');
		const events = await owner.db.select().from(recordEvent);
		expect(events.filter(({ kind }) => kind === 'ethics-letter-kept')).toHaveLength(1);
	});

	it('is refused by its first bytes, its size and its approval', async () => {
		const page = new TextEncoder().encode('<html>%PDF-1.7</html>');
		expect(await keep(page)).toEqual({ ok: false, reason: 'unknown-kind' });
		expect(await keep(new Uint8Array())).toEqual({ ok: false, reason: 'empty' });
		const large = new Uint8Array(letterMaxBytes + 1);
		large.set(pdf);
		expect(await keep(large)).toEqual({ ok: false, reason: 'too-large' });
		const other = await plantStudy(owner.db, home, { codePrefix: 'OT' });
		const [foreign] = await owner.db
			.select({ id: ethicsApproval.id })
			.from(ethicsApproval)
			.where(eq(ethicsApproval.studyId, other.studyId));
		const ofOther = { approvalId: foreign?.id ?? '' };
		expect(await keep(pdf, ofOther)).toEqual({ ok: false, reason: 'no-such-approval' });
	});

	it('can be changed and removed by nobody', async () => {
		const change = app.db.update(ethicsLetter).set({ fileName: 'other.pdf' });
		await expect(change).rejects.toMatchObject({ cause: { code: '42501' } });
		const asOwner = owner.db.delete(ethicsLetter);
		await expect(asOwner).rejects.toMatchObject({ cause: { code: '42501' } });
	});

	it('is known to be there, not read, by roles that must not know what is done', async () => {
		const coordinator = await plantMember(owner.db, home, 'coordinator');
		const read = await coordinator.grantFor('protocol:read');
		const [approval] = await listApprovals(app.db, clock, read);
		expect(approval?.letters).toMatchObject([{ id: null, fileName: 'letter' }]);
		await expect(coordinator.grantFor('ethics:read')).rejects.toMatchObject({ status: 404 });
		const monitor = await plantMember(owner.db, home, 'monitor');
		await expect(monitor.grantFor('ethics:read')).resolves.toBeDefined();
	});

	it('is not found under the address of another study', async () => {
		const [row] = await owner.db.select({ id: ethicsLetter.id }).from(ethicsLetter);
		const other = await plantStudy(owner.db, home, { codePrefix: 'OU' });
		const stranger = await plantMember(owner.db, other, 'investigator');
		const grant = await stranger.grantFor('ethics:read');
		expect(await loadLetter(app.db, grant, row?.id ?? '')).toBeNull();
	});
});
