import { createBlindIndex } from './blind-index';
import { createKeyFolder, type KeyFolder } from './person-keys';
import type { KeyMaterial } from './secret-key';

/** What opens and finds the contact data of participants; nothing of it is in the database. */
export type PeopleKeys = {
	folder: KeyFolder;
	/** Blind index of an e-mail address, hexadecimal; equal for equal mailboxes. */
	indexEmail(email: string): string;
};

export function createPeopleKeys(options: {
	folder: string;
	wrappingKey: KeyMaterial;
}): PeopleKeys {
	return {
		folder: createKeyFolder(options),
		indexEmail: createBlindIndex(options.wrappingKey)
	};
}
