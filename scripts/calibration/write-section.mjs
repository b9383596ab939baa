import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';

const file = fileURLToPath(new URL('../../scheduler/CALIBRATION.md', import.meta.url));
const HEAD = `# Calibration

How often the engine's intervals, ellipsoids, tests and rules keep what they promise, by seeded
simulation. Each section is written by its own script; run it again after a change of method.
`;

/** Puts a section in place of the one with the same title, or at the end; others stay as they are. */
export function writeSection(title, lines) {
	const known = existsSync(file) ? readFileSync(file, 'utf8') : HEAD;
	const [head, ...sections] = known.split(/^(?=## )/m);
	const section = `## ${title}\n\n${lines.join('\n')}\n`;
	const place = sections.findIndex((text) => text.startsWith(`## ${title}\n`));
	if (place < 0) sections.push(section);
	else sections[place] = section;
	const text = [head, ...sections].map((part) => part.trimEnd()).join('\n\n');
	writeFileSync(file, `${text}\n`);
}
