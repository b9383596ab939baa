import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { exportProtocol } from '$lib/server/protocols/export-protocol';
import { freezeVersion } from '$lib/server/protocols/freeze-version';
import { importProtocol } from '$lib/server/protocols/import-protocol';
import { loadDraft } from '$lib/server/protocols/load-draft';
import { createDatabase, type TestDatabase } from '../support/create-database';
import { finishedDraft, freezeDraft, plantNewStudy, type TeamMember } from '../support/plant-team';
import { createTestClock, plantLab } from '../support/planted-study';

let database: TestDatabase;
let handle: DatabaseHandle;
const clock = createTestClock();
let labId: string;
let from: TeamMember;
let to: TeamMember;
let prefixes = 0;

beforeAll(async () => {
	database = await createDatabase();
	handle = openDatabase(database.appUrl);
	({ labId } = await plantLab(handle.db));
});
afterAll(async () => {
	await handle.end();
	await database.drop();
});
beforeEach(async () => {
	const plant = () => {
		const codePrefix = `E${String.fromCharCode(65 + prefixes++)}`;
		return plantNewStudy(handle.db, clock, { labId, codePrefix });
	};
	from = (await plant()).investigator;
	to = (await plant()).investigator;
});

async function exportFirst() {
	await freezeDraft(handle.db, clock, from, finishedDraft());
	const grant = await from.grantFor('protocol:export');
	const exported = await exportProtocol(handle.db, grant, { number: 1 });
	if (!exported) throw new Error('nothing was exported');
	return exported;
}

async function importInto(member: TeamMember, file: unknown, replaceDraft = true) {
	const grant = await member.grantFor('protocol:edit');
	const text = typeof file === 'string' ? file : JSON.stringify(file);
	return importProtocol(handle.db, clock, grant, { text, replaceDraft });
}

describe('an exported protocol', () => {
	it('imported into another study and frozen there has the same hash', async () => {
		const exported = await exportFirst();
		expect(await importInto(to, exported)).toEqual({ ok: true, number: 1 });
		const loaded = await loadDraft(handle.db, await to.grantFor('protocol:edit'));
		const grant = await to.grantFor('protocol:freeze');
		const frozen = await freezeVersion(handle.db, clock, grant, {
			number: 1,
			revision: loaded?.revision ?? -1,
			reason: 'Taken over from the first study'
		});
		expect(frozen).toEqual({ ok: true, number: 1, hash: exported.hash });
	});

	it('does not replace a draft that is being written unless this is said', async () => {
		const exported = await exportFirst();
		expect(await importInto(to, exported, false)).toEqual({ ok: false, reason: 'draft-exists' });
		expect(await importInto(from, exported, false)).toEqual({ ok: true, number: 2 });
	});

	it('is refused when its content was changed since', async () => {
		const exported = await exportFirst();
		const content = { ...exported.content, consentTextVersion: '9' };
		expect(await importInto(to, { ...exported, content })).toMatchObject({
			ok: false,
			reason: 'hash-differs',
			stated: exported.hash
		});
		expect(await importInto(to, 'no json')).toEqual({ ok: false, reason: 'not-json' });
	});
});
