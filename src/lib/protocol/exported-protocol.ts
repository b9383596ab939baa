import { z } from 'zod';
import { protocolContentSchema, type ProtocolContent } from '$scheduler/protocol/protocol-content';
import { listChangedLeaves } from './list-differences';
import { nameLeaf } from './read-leaves';

/** A frozen version as a file; its content alone is what the hash covers. */
export const exportedSchema = z.object({
	kind: z.literal('ovalry-protocol'),
	kindVersion: z.literal(1),
	title: z.string(),
	version: z.number().int().positive(),
	hash: z.string().regex(/^[0-9a-f]{64}$/),
	frozenAt: z.string(),
	content: protocolContentSchema
});
export type ExportedProtocol = z.infer<typeof exportedSchema>;

export type ReadExport =
	| { ok: true; exported: ExportedProtocol }
	| { ok: false; reason: 'not-json' }
	| { ok: false; reason: 'not-a-protocol'; faults: string[] };

/** Reads an exported file; every fault is named with its place. */
export function readExport(text: string): ReadExport {
	let data: unknown;
	try {
		data = JSON.parse(text);
	} catch {
		return { ok: false, reason: 'not-json' };
	}
	const read = exportedSchema.safeParse(data);
	if (read.success) return { ok: true, exported: read.data };
	const faults = read.error.issues
		.slice(0, 12)
		.map(({ path, message }) => `${path.map(String).join('.') || 'file'}: ${message}`);
	return { ok: false, reason: 'not-a-protocol', faults };
}

/** What a draft of this version would lose, by place; empty when reading it back gives an equal text. */
export function listLosses(content: ProtocolContent, readBack: ProtocolContent): string[] {
	return listChangedLeaves(content, readBack).map(nameLeaf);
}
