import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, relative, resolve } from 'node:path';
import ts from 'typescript';

export const checkout = resolve(import.meta.dirname, '../..');

/** Files below some folders of the checkout, as paths with forward slashes. */
export function listFiles(folders: readonly string[], fits = /./): string[] {
	return folders
		.flatMap((folder) => walk(join(checkout, folder)))
		.map((file) => relative(checkout, file).replaceAll('\\', '/'))
		.filter((file) => fits.test(file))
		.toSorted();
}

function walk(folder: string): string[] {
	return readdirSync(folder, { withFileTypes: true }).flatMap((entry) => {
		const path = join(folder, entry.name);
		if (!entry.isDirectory()) return [path];
		return entry.name === 'node_modules' ? [] : walk(path);
	});
}

export function readText(file: string): string {
	return readFileSync(join(checkout, file), 'utf8');
}

/** The TypeScript of a file: all of it, or the scripts of a component. */
export function scriptOf(file: string): string {
	const text = readText(file);
	if (!file.endsWith('.svelte')) return text;
	return [...text.matchAll(/<script[^>]*>([\s\S]*?)<\/script>/g)]
		.map((match) => match[1] ?? '')
		.join('\n');
}

const parsed = new Map<string, ts.SourceFile>();

export function parse(file: string): ts.SourceFile {
	const known = parsed.get(file);
	if (known) return known;
	const { ES2023 } = ts.ScriptTarget;
	const source = ts.createSourceFile(file, scriptOf(file), ES2023, true, ts.ScriptKind.TS);
	parsed.set(file, source);
	return source;
}

export type Import = {
	/** As written. */
	wanted: string;
	/** A file of this checkout, or null for a package. */
	target: string | null;
	/** Gone after compiling. */
	isTypeOnly: boolean;
};

/** Everything a file imports, exports again, or loads while running. */
export function readImports(file: string, source = parse(file)): Import[] {
	const found: Import[] = [];
	const add = (wanted: string, isTypeOnly: boolean) =>
		found.push({ wanted, target: resolveImport(file, wanted), isTypeOnly });
	const visit = (node: ts.Node): void => {
		if (ts.isImportDeclaration(node) && ts.isStringLiteral(node.moduleSpecifier)) {
			add(node.moduleSpecifier.text, isTypeImport(node));
		} else if (
			ts.isExportDeclaration(node) &&
			node.moduleSpecifier &&
			ts.isStringLiteral(node.moduleSpecifier)
		) {
			add(node.moduleSpecifier.text, node.isTypeOnly);
		} else if (
			ts.isCallExpression(node) &&
			node.expression.kind === ts.SyntaxKind.ImportKeyword &&
			node.arguments[0] &&
			ts.isStringLiteral(node.arguments[0])
		) {
			add(node.arguments[0].text, false);
		} else if (ts.isImportTypeNode(node) && ts.isLiteralTypeNode(node.argument)) {
			if (ts.isStringLiteral(node.argument.literal)) add(node.argument.literal.text, true);
		}
		ts.forEachChild(node, visit);
	};
	visit(source);
	return found;
}

function isTypeImport({ importClause }: ts.ImportDeclaration): boolean {
	if (!importClause) return false;
	if (importClause.isTypeOnly) return true;
	const named = importClause.namedBindings;
	if (importClause.name || !named || !ts.isNamedImports(named)) return false;
	return named.elements.length > 0 && named.elements.every((element) => element.isTypeOnly);
}

const known = new Set(
	listFiles(['src', 'scheduler', 'scripts', 'tests'], /\.(ts|js|mjs|svelte|json|css)$/)
);

function resolveImport(from: string, wanted: string): string | null {
	const path = wanted.startsWith('$lib')
		? wanted.replace('$lib', 'src/lib')
		: wanted.startsWith('$scheduler')
			? wanted.replace('$scheduler', 'scheduler')
			: wanted.startsWith('.')
				? join(dirname(from), wanted).replaceAll('\\', '/')
				: null;
	if (path === null) return null;
	const tries = [path, `${path}.ts`, `${path}.svelte`, `${path}/index.ts`, `${path}.svelte.ts`];
	return tries.find((file) => known.has(file)) ?? path;
}
