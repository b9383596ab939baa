import { mkdtemp, readdir, readFile, rm, stat, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { createKeyFolder, KeyFolderFault, PersonKeyMissing } from './person-keys';

const anna = '0c5d6a1e-4f3b-4d53-9c0a-6f2f0f3c9a01';
const ben = '0c5d6a1e-4f3b-4d53-9c0a-6f2f0f3c9a02';
const wrappingKey = Buffer.alloc(32, 9).toString('base64url');

let folder = '';
beforeEach(async () => {
	folder = await mkdtemp(join(tmpdir(), 'ovalry-keys-'));
});
afterEach(() => rm(folder, { recursive: true, force: true }));

describe('key folder', () => {
	it('gives back what it encrypted, to another process too', async () => {
		const keys = createKeyFolder({ folder, wrappingKey });
		await keys.createKey(anna);
		const stored = await keys.encrypt(anna, 'anna@people.example, Übung');
		const again = createKeyFolder({ folder, wrappingKey });
		expect(await again.readText(anna, stored)).toEqual({
			ok: true,
			text: 'anna@people.example, Übung'
		});
	});

	it('encrypts the same text to other bytes each time', async () => {
		const keys = createKeyFolder({ folder, wrappingKey });
		await keys.createKey(anna);
		const first = Buffer.from(await keys.encrypt(anna, 'x'));
		expect(first.equals(await keys.encrypt(anna, 'x'))).toBe(false);
	});

	it('keeps the first of two keys made at the same time', async () => {
		const keys = createKeyFolder({ folder, wrappingKey });
		await Promise.all([keys.createKey(anna), keys.createKey(anna), keys.createKey(anna)]);
		const stored = await keys.encrypt(anna, 'once');
		await keys.createKey(anna);
		expect(await keys.readText(anna, stored)).toEqual({ ok: true, text: 'once' });
		expect(await readdir(join(folder, 'people'))).toEqual([`${anna}.key`]);
	});

	it('keeps key files to their owner and holds no key in the clear', async () => {
		const keys = createKeyFolder({ folder, wrappingKey });
		await keys.createKey(anna);
		const path = join(folder, 'people', `${anna}.key`);
		expect((await stat(path)).mode & 0o777).toBe(0o600);
		expect((await stat(join(folder, 'people'))).mode & 0o777).toBe(0o700);
		expect((await readFile(path)).length).toBe(1 + 12 + 32 + 16);
	});

	it('makes content unreadable for good once the key is destroyed', async () => {
		const keys = createKeyFolder({ folder, wrappingKey });
		await keys.createKey(anna);
		const stored = await keys.encrypt(anna, 'gone');
		await keys.destroyKey(anna);
		await keys.destroyKey(anna);
		expect(await keys.readText(anna, stored)).toEqual({ ok: false, reason: 'erased' });
		await expect(keys.decrypt(anna, stored)).rejects.toThrow(PersonKeyMissing);
		await expect(keys.createKey(anna)).rejects.toThrow(/erased/);
		expect(await readdir(join(folder, 'people'))).toEqual([`${anna}.erased`]);
	});

	it('tells a person who never had a key from one who was erased', async () => {
		const keys = createKeyFolder({ folder, wrappingKey });
		await expect(keys.encrypt(anna, 'x')).rejects.toMatchObject({ reason: 'never-made' });
	});

	it('opens nobody else’s content, and names altered content', async () => {
		const keys = createKeyFolder({ folder, wrappingKey });
		await keys.createKey(anna);
		await keys.createKey(ben);
		const stored = await keys.encrypt(anna, 'x');
		await expect(keys.decrypt(ben, stored)).rejects.toThrow(KeyFolderFault);
		await expect(keys.decrypt(anna, stored.subarray(1))).rejects.toThrow(/altered or cut short/);
	});

	it('refuses another wrapping key, by its check and for each person', async () => {
		const keys = createKeyFolder({ folder, wrappingKey });
		await keys.createKey(anna);
		expect(await keys.check()).toEqual({ ok: true });
		const wrong = createKeyFolder({ folder, wrappingKey: new Uint8Array(32) });
		expect(await wrong.check()).toEqual({ ok: false, reason: 'wrong-wrapping-key' });
		await expect(wrong.encrypt(anna, 'x')).rejects.toThrow(/OVALRY_WRAPPING_KEY/);
	});

	it('names a damaged key file', async () => {
		const keys = createKeyFolder({ folder, wrappingKey });
		await keys.createKey(anna);
		await writeFile(join(folder, 'people', `${anna}.key`), Buffer.alloc(61));
		await expect(keys.encrypt(anna, 'x')).rejects.toThrow(/damaged/);
	});

	it('refuses ids that could leave the folder, and short wrapping keys', async () => {
		const keys = createKeyFolder({ folder, wrappingKey });
		await expect(keys.createKey('../../etc/passwd')).rejects.toThrow(TypeError);
		expect(() => createKeyFolder({ folder, wrappingKey: 'c2hvcnQ' })).toThrow(/32 bytes/);
	});
});
