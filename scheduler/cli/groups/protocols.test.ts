import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { PROTOCOL_COMMANDS } from './protocols.ts';

const run = (input: unknown) => PROTOCOL_COMMANDS['document-hash']?.run(input);
// Canonical by hand (RFC 8785): names sorted, shortest numbers, no blanks.
const byHand = '{"arms":[{"key":"a"}],"b":1.5,"visits":[{"number":1}]}';
const sha256 = createHash('sha256').update(byHand).digest('hex');
const content = { visits: [{ number: 1.0 }], b: 1.5, arms: [{ key: 'a' }] };

describe('document-hash', () => {
	it('is the SHA-256 of the canonical JSON, whatever the order of names', () => {
		expect(run(content)).toEqual({ sha256, bytes: byHand.length, stated: null, equal: null });
	});

	it('says whether an exported file states its own hash', () => {
		expect(run({ content, hash: sha256 })).toMatchObject({ equal: true });
		const changed = { ...content, b: 1.6 };
		expect(run({ content: changed, hash: sha256 })).toMatchObject({ equal: false, stated: sha256 });
	});
});
