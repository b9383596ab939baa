import ts from 'typescript';
import { describe, expect, test } from 'vitest';
import { permissions } from '$lib/server/access/permissions';
import { listFiles, parse } from './source-files';

/** Entries that need no sign-in, and what guards them instead. */
const publicEntries: Record<string, string> = {
	'src/routes/+layout.server.ts load': 'shows the masthead of whoever is signed in; guards nothing',
	'src/routes/+page.server.ts load': 'the front page, for everybody',
	'src/routes/signin/+page.server.ts load': 'where everybody signs in',
	'src/routes/signin/+page.server.ts link': 'asks for a link; rate-limited',
	'src/routes/signin/+page.server.ts university': 'goes to the university’s sign-on; rate-limited',
	'src/routes/signin/confirm/+page.server.ts load': 'reads nothing but its own address',
	'src/routes/signout/+server.ts POST': 'ends the session of this browser, if there is one',
	'src/routes/setup/[token]/+page.server.ts load': 'the terminal’s one-time link; rate-limited',
	'src/routes/setup/[token]/+page.server.ts default': 'the terminal’s one-time link; rate-limited'
};

/** Guards other than `requirePermission`, each with the part of the product it belongs to. */
const otherGuards: Record<string, RegExp> = {
	requireDemo: /^src\/routes\/demo\//,
	requireAnswerLink: /^src\/routes\/\(participant\)\//
};

/** Permissions that no entry asks for yet, with the reason; take one out when an entry does. */
const unused: Record<string, string> = {
	'decision:count': 'no page shows counts of decisions by themselves yet'
};

/** What a file of a route may export that is no entry. */
const settings = ['prerender', 'ssr', 'csr', 'trailingSlash', 'config', 'entries'];

type Entry = { file: string; name: string; first: ts.Statement | undefined };
const serverFiles = listFiles(['src/routes'], /\+(page|layout)\.server\.ts$|\+server\.ts$/);
const entries = serverFiles.flatMap(findEntries);
const keyOf = ({ file, name }: Entry) => `${file} ${name}`;

describe('every entry of the server', () => {
	test('is found', () => {
		expect(entries.length).toBeGreaterThan(20);
	});

	test.each(entries.map((entry) => [keyOf(entry), entry] as const))(
		'%s asks first who may come in',
		(key, entry) => {
			if (key in publicEntries) return expect(publicEntries[key]).not.toBe('');
			const guard = readGuard(entry.first);
			expect(guard, `${key} must begin with: const grant = await requirePermission(...)`).not.toBe(
				null
			);
			if (guard?.name === 'requirePermission') {
				expect(Object.keys(permissions)).toContain(guard.permission);
			} else {
				expect(entry.file).toMatch(otherGuards[guard?.name ?? ''] ?? /$^/);
			}
		}
	);

	test('on the public list exists', () => {
		const keys = new Set(entries.map(keyOf));
		expect(Object.keys(publicEntries).filter((key) => !keys.has(key))).toEqual([]);
	});
});

test('every permission of the table is asked for somewhere', () => {
	const asked = new Set(
		entries.flatMap(({ first }) => {
			const guard = readGuard(first);
			return guard?.permission ? [guard.permission] : [];
		})
	);
	const silent = Object.keys(permissions).filter((name) => !asked.has(name));
	expect(silent.toSorted()).toEqual(Object.keys(unused).toSorted());
});

/** The functions of a file that the framework calls. */
function findEntries(file: string): Entry[] {
	const found: Entry[] = [];
	for (const statement of parse(file).statements) {
		if (!isExported(statement)) continue;
		if (ts.isFunctionDeclaration(statement) && statement.name) {
			found.push({ file, name: statement.name.text, first: statement.body?.statements[0] });
		}
		if (!ts.isVariableStatement(statement)) continue;
		for (const { name, initializer } of statement.declarationList.declarations) {
			if (!ts.isIdentifier(name) || !initializer) continue;
			found.push(...readExport(file, name.text, initializer));
		}
	}
	return found;
}

function readExport(file: string, name: string, value: ts.Expression): Entry[] {
	if (settings.includes(name)) return [];
	const inner = strip(value);
	if (name !== 'actions') return [{ file, name, first: firstOf(inner) }];
	if (!ts.isObjectLiteralExpression(inner)) return [{ file, name, first: undefined }];
	return inner.properties.map((property) => {
		const action = property.name?.getText() ?? 'unnamed';
		if (ts.isPropertyAssignment(property)) {
			return { file, name: action, first: firstOf(strip(property.initializer)) };
		}
		const body = ts.isMethodDeclaration(property) ? property.body : undefined;
		return { file, name: action, first: body?.statements[0] };
	});
}

function firstOf(value: ts.Expression): ts.Statement | undefined {
	if (!ts.isArrowFunction(value) && !ts.isFunctionExpression(value)) return undefined;
	if (ts.isBlock(value.body)) return value.body.statements[0];
	return ts.factory.createExpressionStatement(value.body);
}

function strip(value: ts.Expression): ts.Expression {
	if (ts.isSatisfiesExpression(value) || ts.isAsExpression(value)) return strip(value.expression);
	return ts.isParenthesizedExpression(value) ? strip(value.expression) : value;
}

function isExported(statement: ts.Statement): boolean {
	return (
		ts.canHaveModifiers(statement) &&
		(ts.getModifiers(statement) ?? []).some(({ kind }) => kind === ts.SyntaxKind.ExportKeyword)
	);
}

type Guard = { name: string; permission: string | null };

/** `const grant = await requirePermission(event.locals, 'name', params)`, or another guard. */
function readGuard(first: ts.Statement | undefined): Guard | null {
	const call = first ? findCall(first) : null;
	if (!call || !ts.isIdentifier(call.expression)) return null;
	const name = call.expression.text;
	if (name in otherGuards) return { name, permission: null };
	if (name !== 'requirePermission') return null;
	const wanted = call.arguments[1];
	return wanted && ts.isStringLiteral(wanted) ? { name, permission: wanted.text } : null;
}

function findCall(statement: ts.Statement): ts.CallExpression | null {
	const value = ts.isVariableStatement(statement)
		? statement.declarationList.declarations[0]?.initializer
		: ts.isExpressionStatement(statement)
			? statement.expression
			: undefined;
	if (!value) return null;
	const isAwaited = ts.isAwaitExpression(value);
	const inner = isAwaited ? value.expression : value;
	if (!ts.isCallExpression(inner) || !ts.isIdentifier(inner.expression)) return null;
	// A guard that answers later must be waited for.
	return isAwaited || inner.expression.text === 'requireDemo' ? inner : null;
}
