export const letterTypes = ['application/pdf', 'image/png', 'image/jpeg'] as const;
export type LetterType = (typeof letterTypes)[number];

/** Largest letter that is kept. */
export const letterMaxBytes = 10 * 1024 * 1024;

const magics: readonly { type: LetterType; bytes: readonly number[] }[] = [
	{ type: 'application/pdf', bytes: [0x25, 0x50, 0x44, 0x46, 0x2d] },
	{ type: 'image/png', bytes: [0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a] },
	{ type: 'image/jpeg', bytes: [0xff, 0xd8, 0xff] }
];

/** What a file is by its first bytes, whatever its name says; null for anything but a letter's kinds. */
export function findLetterType(content: Uint8Array): LetterType | null {
	const found = magics.find(({ bytes }) => bytes.every((byte, at) => content[at] === byte));
	return found?.type ?? null;
}
