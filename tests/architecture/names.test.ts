import { basename, extname } from 'node:path';
import ts from 'typescript';
import { describe, expect, test } from 'vitest';
import { listFiles, parse, readText } from './source-files';

const files = listFiles(
	['src', 'scheduler', 'scripts', 'tests'],
	/\.(ts|mjs|js|svelte|css)$/
).filter((file) => !file.startsWith('tests/data/'));
const lineCount = (file: string) => readText(file).split('\n').length - 1;

test('a file is named in kebab-case, a component in PascalCase', () => {
	const kebab =
		/^[a-z0-9]+(-[a-z0-9]+)*(\.(test|property\.test|test-data|bench|server|d|config|svelte))?$/;
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

	test('in the application, 300 lines at the most', () => {
		const long = files
			.filter((file) => file.startsWith('src/') && !file.endsWith('.test.ts'))
			.filter((file) => lineCount(file) > 300);
		expect(long).toEqual([]);
	});
});

describe('nothing goes around the types', () => {
	const checked = files.filter(
		(file) => /\.(ts|svelte)$/.test(file) && !file.startsWith('tests/architecture/')
	);

	test('no any, no exclamation mark for what may be absent', () => {
		expect(checked.flatMap(findWaysAround)).toEqual([]);
	});

	test('no comment switches a check off', () => {
		const off = /@ts-(ignore|nocheck|expect-error)|eslint-disable/;
		expect(checked.filter((file) => off.test(readText(file)))).toEqual([]);
	});
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

function findWaysAround(file: string): string[] {
	const source = parse(file);
	const faults: string[] = [];
	const visit = (node: ts.Node): void => {
		const line = () => source.getLineAndCharacterOfPosition(node.getStart()).line + 1;
		if (node.kind === ts.SyntaxKind.AnyKeyword) faults.push(`${file}:${line()} any`);
		if (ts.isNonNullExpression(node)) faults.push(`${file}:${line()} ${node.getText()}`);
		ts.forEachChild(node, visit);
	};
	visit(source);
	return faults;
}
