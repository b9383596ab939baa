import { createHash } from 'node:crypto';
import { z } from 'zod';
import { canonicalJson } from '../../policies/canonical-json.ts';
import { command, type CommandGroup } from '../command.ts';

const contentSchema = z.looseObject({ arms: z.array(z.unknown()), visits: z.array(z.unknown()) });

/** An exported protocol as it is, or its content alone. */
const documentSchema = z.union([
	z.looseObject({ content: contentSchema, hash: z.string().optional() }),
	contentSchema
]);

const verdictSchema = z.strictObject({
	sha256: z.string().describe('SHA-256 of the canonical JSON (RFC 8785) of the content'),
	bytes: z.number().int().describe('length of the canonical JSON in UTF-8'),
	stated: z.string().nullable().describe('the hash that the file states; null: none'),
	equal: z.boolean().nullable().describe('whether both are the same; null where none is stated')
});

function hashDocument(given: z.output<typeof documentSchema>): z.output<typeof verdictSchema> {
	const isWrapped = 'content' in given && typeof given.content === 'object';
	const text = canonicalJson(isWrapped ? given.content : given);
	const sha256 = createHash('sha256').update(text, 'utf8').digest('hex');
	const stated = isWrapped && typeof given.hash === 'string' ? given.hash : null;
	return {
		sha256,
		bytes: Buffer.byteLength(text, 'utf8'),
		stated,
		equal: stated === null ? null : stated === sha256
	};
}

/** Protocols as documents on the command line. */
export const PROTOCOL_COMMANDS: CommandGroup = {
	'document-hash': command(
		'The hash of an exported protocol, and whether it is the one that the file states',
		{ input: documentSchema, output: verdictSchema },
		hashDocument
	)
};
