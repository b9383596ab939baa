import { gunzipSync } from 'node:zlib';

export type Decoded =
	| { ok: true; text: string; encoding: 'utf-8' | 'windows-1252'; isCompressed: boolean }
	| { ok: false; code: DecodeFault; message: string };
export type DecodeFault = 'empty' | 'spreadsheet' | 'bad-checksum' | 'too-large' | 'not-text';

/** Largest file after unpacking: 64 MiB, about a million trials. */
export const maxUnpackedBytes = 64 * 1024 * 1024;

/** Turns a file's bytes into text: unpacks gzip, refuses workbooks and binary, guesses the encoding. */
export function decodeBytes(bytes: Uint8Array): Decoded {
	const isCompressed = bytes[0] === 0x1f && bytes[1] === 0x8b;
	const unpacked = isCompressed ? unpack(bytes) : { ok: true as const, plain: bytes };
	if (!unpacked.ok) return unpacked;
	const { plain } = unpacked;
	if (plain.length === 0) return refuse('empty', 'The file is empty: no header and no data rows.');
	if (plain.length > maxUnpackedBytes) return tooLarge();
	if ((plain[0] === 0x50 && plain[1] === 0x4b) || (plain[0] === 0xd0 && plain[1] === 0xcf)) {
		return refuse(
			'spreadsheet',
			'This is a spreadsheet workbook, not text. Open it, choose “Save as”, take CSV (UTF-8), and upload that file.'
		);
	}
	const nul = plain.indexOf(0);
	if (nul >= 0) {
		return refuse(
			'not-text',
			`The file holds NUL bytes (first at byte ${nul}), as after a broken write. Export it again.`
		);
	}
	return { ok: true, ...decodeText(plain), isCompressed };
}

function unpack(
	bytes: Uint8Array
): { ok: true; plain: Uint8Array } | Extract<Decoded, { ok: false }> {
	try {
		return { ok: true, plain: gunzipSync(bytes, { maxOutputLength: maxUnpackedBytes }) };
	} catch (error) {
		if ((error as { code?: string }).code === 'ERR_BUFFER_TOO_LARGE') return tooLarge();
		return refuse(
			'bad-checksum',
			'The compressed file is damaged: its checksum does not fit. Pack or copy it again.'
		);
	}
}

function decodeText(plain: Uint8Array): { text: string; encoding: 'utf-8' | 'windows-1252' } {
	try {
		return { text: new TextDecoder('utf-8', { fatal: true }).decode(plain), encoding: 'utf-8' };
	} catch {
		return { text: new TextDecoder('windows-1252').decode(plain), encoding: 'windows-1252' };
	}
}

function tooLarge() {
	const message = 'The file is over 64 MiB unpacked. Upload one visit or one person at a time.';
	return refuse('too-large', message);
}

function refuse(code: DecodeFault, message: string) {
	return { ok: false as const, code, message };
}
