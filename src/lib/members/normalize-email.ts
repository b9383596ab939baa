/** An e-mail address as it is stored and compared: no spaces around, lower case, one way to write it. */
export function normalizeEmail(typed: string): string {
	return typed.normalize('NFKC').trim().toLowerCase();
}
