import { checkText, faultAt, type Fault } from './fault';
import type { ProtocolDraft } from './protocol-draft';

/** What is wrong with the texts that are read: without version or text, twice, or named but not there. */
export function findInstructionFaults({ instructions, visits }: ProtocolDraft): Fault[] {
	const versions = instructions.map(({ version }) => version.trim());
	const known = new Set(versions);
	const named = new Set(
		visits.flatMap(({ blocks, armBlocks }) =>
			[blocks, ...Object.values(armBlocks)].flat().flatMap(({ instruction }) => instruction || [])
		)
	);
	return [
		...instructions.flatMap(({ version, text }, index) => {
			const place = `Instructions, text ${index + 1}`;
			const at = (field: string) => ({ place, field: `instructions.${index}.${field}` });
			const isTwice = version.trim() !== '' && versions.indexOf(version.trim()) < index;
			const twice = `Version ${version} stands twice.`;
			return [
				...checkText({
					...{ ...at('version'), value: version, name: 'The version', remedy: 'Give it one.' }
				}),
				...checkText({
					...{ ...at('text'), value: text, name: 'The text', remedy: 'Write what is read.' }
				}),
				...(isTwice
					? [faultAt('version-twice', at('version'), twice, 'Give each its own version.')]
					: [])
			];
		}),
		...[...named]
			.filter((version) => !known.has(version))
			.map((version) =>
				faultAt(
					...(['instruction-unknown', { place: 'Instructions', field: 'instructions' }] as const),
					`Blocks name the text ${version}, which is not written.`,
					'Add the text, or name another in these blocks.'
				)
			)
	];
}
