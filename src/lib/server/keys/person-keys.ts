import { randomBytes } from 'node:crypto';
import { join } from 'node:path';
import { openBox, sealBox } from './authenticated-box';
import { destroyFile, readIfThere, writeNewFile } from './key-file';
import { deriveKey, type KeyMaterial } from './secret-key';

/**
 * One key per person, in files outside the database, each wrapped by the key of the settings.
 *
 * Destroying a person's key makes everything encrypted with it unreadable, in every backup of the
 * database too. Nothing is kept in memory, so a destroyed key is gone in every process at once.
 */
export interface KeyFolder {
	/** Makes the person's key; a key that is there already stays. */
	createKey(subjectId: string): Promise<void>;
	encrypt(subjectId: string, plaintext: Uint8Array | string): Promise<Uint8Array>;
	/** @throws PersonKeyMissing, KeyFolderFault */
	decrypt(subjectId: string, ciphertext: Uint8Array): Promise<Uint8Array>;
	/** Text of a person, or that it was erased: for pages that list people. */
	readText(subjectId: string, ciphertext: Uint8Array): Promise<ReadText>;
	/** Destroys the key for good; no new one can be made for this person. */
	destroyKey(subjectId: string): Promise<void>;
	/** Whether the settings' key opens this folder; makes the check file in a new folder. */
	check(): Promise<{ ok: true } | { ok: false; reason: 'wrong-wrapping-key' }>;
}

export type ReadText = { ok: true; text: string } | { ok: false; reason: 'erased' };

/** A person has no key: erased, or nothing was ever stored under this id. */
export class PersonKeyMissing extends Error {
	override name = 'PersonKeyMissing';
	constructor(
		readonly subjectId: string,
		readonly reason: 'erased' | 'never-made'
	) {
		super(
			reason === 'erased'
				? `Person ${subjectId} was erased: the key is destroyed and the content cannot be read.`
				: `Person ${subjectId} has no key in this key folder. Is it the folder that belongs to this database?`
		);
	}
}

/** The key folder and the settings, or the stored bytes and the key, do not belong together. */
export class KeyFolderFault extends Error {
	override name = 'KeyFolderFault';
}

const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;
const CHECK_TEXT = 'ovalry key folder';

export function createKeyFolder(options: { folder: string; wrappingKey: KeyMaterial }): KeyFolder {
	const wrapping = deriveKey(options.wrappingKey, 'ovalry.person-key-wrapping.v1');
	const people = join(options.folder, 'people');
	const keyPath = (subjectId: string) => join(people, `${checkedId(subjectId)}.key`);
	const erasedPath = (subjectId: string) => join(people, `${checkedId(subjectId)}.erased`);
	const isErased = async (id: string) => (await readIfThere(erasedPath(id))) !== undefined;

	async function keyOf(subjectId: string): Promise<Uint8Array> {
		const wrapped = await readIfThere(keyPath(subjectId));
		const erased = await isErased(subjectId);
		if (erased) throw new PersonKeyMissing(subjectId, 'erased');
		if (!wrapped) throw new PersonKeyMissing(subjectId, 'never-made');
		const key = openBox(wrapping, wrapped, wrapPlace(subjectId));
		if (key) return key;
		throw new KeyFolderFault(
			`The key of person ${subjectId} does not open: OVALRY_WRAPPING_KEY is not the one this key folder was made with, or the file is damaged.`
		);
	}

	async function decrypt(subjectId: string, ciphertext: Uint8Array): Promise<Uint8Array> {
		const plain = openBox(await keyOf(subjectId), ciphertext, dataPlace(subjectId));
		if (plain) return plain;
		throw new KeyFolderFault(`Stored content of person ${subjectId} was altered or cut short.`);
	}

	return {
		decrypt,
		async createKey(subjectId) {
			if (await isErased(subjectId)) throw new PersonKeyMissing(subjectId, 'erased');
			const box = sealBox(wrapping, randomBytes(32), wrapPlace(subjectId));
			await writeNewFile(keyPath(subjectId), box);
		},
		async encrypt(subjectId, plaintext) {
			const bytes = typeof plaintext === 'string' ? Buffer.from(plaintext) : plaintext;
			return sealBox(await keyOf(subjectId), bytes, dataPlace(subjectId));
		},
		async readText(subjectId, ciphertext) {
			try {
				const text = Buffer.from(await decrypt(subjectId, ciphertext)).toString('utf8');
				return { ok: true, text };
			} catch (error) {
				const erased = error instanceof PersonKeyMissing && error.reason === 'erased';
				if (erased) return { ok: false, reason: 'erased' };
				throw error;
			}
		},
		async destroyKey(subjectId) {
			await writeNewFile(erasedPath(subjectId), new Uint8Array());
			await destroyFile(keyPath(subjectId));
		},
		async check() {
			const path = join(options.folder, 'check');
			await writeNewFile(path, sealBox(wrapping, Buffer.from(CHECK_TEXT), 'ovalry.check.v1'));
			const stored = await readIfThere(path);
			const opens = stored && openBox(wrapping, stored, 'ovalry.check.v1');
			return opens ? { ok: true } : { ok: false, reason: 'wrong-wrapping-key' };
		}
	};
}

function checkedId(subjectId: string): string {
	if (UUID.test(subjectId)) return subjectId;
	throw new TypeError('A person is named by a lower-case UUID');
}

function wrapPlace(subjectId: string): string {
	return `ovalry.person-key.v1:${subjectId}`;
}

function dataPlace(subjectId: string): string {
	return `ovalry.person-data.v1:${subjectId}`;
}
