import { basename, extname } from 'node:path';
import { describe, expect, test } from 'vitest';
import { listFiles, readText } from './source-files';

const files = listFiles(
	['src', 'scheduler', 'scripts', 'tests'],
	/\.(ts|mjs|js|svelte|css)$/
).filter((file) => !file.startsWith('tests/data/'));
const lineCount = (file: string) => readText(file).split('\n').length - 1;

test('a file is named in kebab-case, a component in PascalCase', () => {
	const kebab = /^[a-z0-9]+(-[a-z0-9]+)*(\.(test|server|d|config|svelte))?$/;
	const pascal = /^[A-Z][A-Za-z0-9]*$/;
	const route = /^\+(page|layout|server|error)(@[^.]*)?(\.server)?$/;
	const faults = files.filter((file) => {
		const name = basename(file, extname(file));
		if (file.startsWith('src/routes/') && route.test(name)) return false;
		return file.endsWith('.svelte') ? !pascal.test(name) : !kebab.test(name);
	});
	expect(faults).toEqual([]);
});

test('no folder or file is a drawer for everything', () => {
	const drawers = /(^|[/-])(utils?|helpers?|common|misc|managers?|stuff|shared)([/.-]|$)/;
	expect(files.filter((file) => drawers.test(file))).toEqual([]);
});

describe('a file can be read in one go', () => {
	test('in the engine, 350 lines at the most', () => {
		const long = files
			.filter((file) => file.startsWith('scheduler/') && !file.endsWith('.test.ts'))
			.filter((file) => lineCount(file) > 350);
		expect(long).toEqual([]);
	});

	test('in the application, 260 lines at the most', () => {
		const long = files
			.filter((file) => file.startsWith('src/') && !file.endsWith('.test.ts'))
			.filter((file) => lineCount(file) > 260);
		expect(long).toEqual([]);
	});
});

test('a component of the interface has no unused way around the types', () => {
	const ways = /@ts-ignore|@ts-nocheck|eslint-disable|\bas any\b|: any\b|<any>/;
	expect(
		files.filter((file) => !file.startsWith('tests/architecture/') && ways.test(readText(file)))
	).toEqual([]);
});

test('no test is left out or run alone', () => {
	const left = /\b(describe|test|it)\.(skip|only|todo|fails)\b/;
	const faults = files.filter((file) => file.endsWith('.test.ts') && left.test(readText(file)));
	expect(faults).toEqual([]);
});

test('no address of a person stands in the source but invented ones', () => {
	const address = /[\w.+-]+@([\w-]+\.)+[a-z]{2,}\b/gi;
	const faults = files.flatMap((file) =>
		[...readText(file).matchAll(address)]
			.map(([text]) => text)
			.filter((text) => !/\.(example|invalid|test|localhost)$/i.test(text))
			.map((text) => `${file}: ${text}`)
	);
	expect(faults).toEqual([]);
});
