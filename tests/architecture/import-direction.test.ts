import ts from 'typescript';
import { describe, expect, test } from 'vitest';
import { listFiles, parse, readImports, scriptOf, type Import } from './source-files';

const isTest = /\.test\.ts$/;
const files = listFiles(['src', 'scheduler'], /\.(ts|svelte)$/).filter(
	(file) => !isTest.test(file)
);
const imports = new Map(files.map((file) => [file, readImports(file)]));
const own = (file: string): Import[] => imports.get(file) ?? [];

/** Adapters to one outside thing each, in src/lib/server; every other folder there is a feature. */
const adapters = [
	'db',
	'access',
	'jobs',
	'mail',
	'storage',
	'payments',
	'auth',
	'http',
	'keys',
	'record'
];

describe('the engine', () => {
	const engine = files.filter((file) => file.startsWith('scheduler/'));

	test('imports nothing of the application', () => {
		const faults = engine.flatMap((file) =>
			own(file)
				.filter(({ target }) => target !== null && !target.startsWith('scheduler/'))
				.map(({ wanted }) => `${file} imports ${wanted}`)
		);
		expect(faults).toEqual([]);
	});

	test('takes only pure packages, and reads a file or a stream only in its command line', () => {
		const pure = ['ml-matrix', 'jstat', 'simple-statistics', 'pure-rand', 'zod', 'canonicalize'];
		const faults = engine.flatMap((file) =>
			own(file)
				.filter(({ target, wanted }) => target === null && !isPure(file, wanted))
				.map(({ wanted }) => `${file} imports ${wanted}`)
		);
		expect(faults).toEqual([]);

		function isPure(file: string, wanted: string): boolean {
			if (pure.some((name) => wanted === name || wanted.startsWith(`${name}/`))) return true;
			return file.startsWith('scheduler/cli/') && wanted.startsWith('node:');
		}
	});

	test('has no clock and no hidden randomness', () => {
		const faults = engine.filter((file) => !file.startsWith('scheduler/cli/')).flatMap(findImpure);
		expect(faults).toEqual([]);
	});

	test('draws allocation from a stream handed in, with no generator within reach', () => {
		const allocation = files.filter((file) =>
			/^(scheduler\/allocation|src\/lib\/server\/(allocation|keys))\//.test(file)
		);
		const faults = allocation.flatMap((file) =>
			own(file)
				.filter(({ wanted, target }) => isGenerator(wanted, target))
				.map(({ wanted }) => `${file} imports ${wanted}`)
		);
		const reached = reachFrom(allocation.filter((file) => file.startsWith('scheduler/')));
		const hidden = reached.flatMap((file) =>
			own(file)
				.filter(({ wanted, target }) => isGenerator(wanted, target))
				.map(({ wanted }) => `allocation reaches ${wanted} through ${file}`)
		);
		expect([...faults, ...hidden]).toEqual([]);
		expect(reached).toContain('scheduler/random/random-stream.ts');

		function isGenerator(wanted: string, target: string | null): boolean {
			if (/^(pure-rand|jstat|simple-statistics)(\/|$)/.test(wanted)) return true;
			// Of scheduler/random only what draws from a stream that somebody else opened.
			if (!target?.startsWith('scheduler/random/')) return false;
			return target !== 'scheduler/random/random-stream.ts';
		}
	});

	/** A part may import parts that stand before it; the command line may import all. */
	const before: Record<string, string[]> = {
		random: [],
		'linear-algebra': [],
		statistics: ['random', 'linear-algebra'],
		tasks: ['random', 'linear-algebra', 'statistics'],
		variability: ['random', 'linear-algebra', 'statistics', 'tasks'],
		perturbations: ['random', 'linear-algebra', 'statistics', 'tasks', 'variability'],
		policies: ['random', 'linear-algebra', 'statistics', 'tasks', 'variability', 'perturbations'],
		learners: ['random', 'linear-algebra', 'statistics', 'tasks', 'variability', 'perturbations'],
		analysis: ['random', 'linear-algebra', 'statistics', 'tasks'],
		simulation: [
			'random',
			'linear-algebra',
			'statistics',
			'tasks',
			'variability',
			'perturbations',
			'policies',
			'learners'
		],
		power: [
			'random',
			'linear-algebra',
			'statistics',
			'tasks',
			'variability',
			'perturbations',
			'policies',
			'learners',
			'simulation'
		],
		protocol: [
			...['random', 'linear-algebra', 'statistics', 'tasks', 'variability', 'perturbations'],
			'policies'
		],
		design: [
			...['random', 'linear-algebra', 'statistics', 'tasks', 'variability', 'perturbations'],
			...['policies', 'learners', 'simulation', 'booking', 'power', 'protocol']
		],
		allocation: ['random'],
		booking: ['random'],
		calibration: [
			...['random', 'linear-algebra', 'statistics', 'tasks', 'variability', 'perturbations'],
			...['policies', 'learners', 'analysis', 'simulation', 'power', 'allocation']
		]
	};

	test('has parts that import only the parts before them', () => {
		const faults = engine.flatMap((file) => {
			const part = partOf(file);
			if (part === 'cli') return [];
			const allowed = before[part] ?? (part.endsWith('.ts') ? [] : null);
			if (allowed === null) return [`${file}: the part ${part} is not in the order of parts`];
			return own(file)
				.map(({ target }) => target ?? '')
				.filter((target) => target.startsWith('scheduler/'))
				.filter((target) => ![part, ...allowed].includes(partOf(target)) && !isRootFile(target))
				.map((target) => `${file} imports ${target}`);
		});
		expect(faults).toEqual([]);

		function partOf(path: string): string {
			return path.split('/')[1] ?? '';
		}
		function isRootFile(path: string): boolean {
			return path.split('/').length === 2;
		}
	});
});

describe('the application', () => {
	test('reads the environment in one file', () => {
		const faults = files.filter(
			(file) =>
				file !== 'src/lib/server/config.ts' &&
				/\bprocess\.env\b|\bimport\.meta\.env\b|['"]\$env\//.test(scriptOf(file))
		);
		expect(faults).toEqual([]);
	});

	test('keeps the framework’s own modules out of what the worker imports', () => {
		// hooks and http are the web process only.
		const faults = files
			.filter((file) => /^src\/(lib\/server|worker)\//.test(file))
			.filter((file) => !file.startsWith('src/lib/server/http/'))
			.flatMap((file) =>
				own(file)
					.filter(({ wanted }) => wanted.startsWith('$app/'))
					.map(({ wanted }) => `${file} imports ${wanted}`)
			);
		expect(faults).toEqual([]);
	});

	test('lets no component and no client-safe module import the server half', () => {
		const faults = files
			.filter((file) => isForClient(file))
			.flatMap((file) =>
				own(file)
					.filter(({ target, isTypeOnly }) => !isTypeOnly && target?.startsWith('src/lib/server/'))
					.map(({ wanted }) => `${file} imports ${wanted}`)
			);
		expect(faults).toEqual([]);

		function isForClient(file: string): boolean {
			if (file.endsWith('.svelte')) return true;
			return file.startsWith('src/lib/') && !file.startsWith('src/lib/server/');
		}
	});

	test('lets nothing below a route import a route', () => {
		const faults = files
			.filter((file) => file.startsWith('src/lib/') || file.startsWith('src/worker/'))
			.flatMap((file) =>
				own(file)
					.filter(({ target }) => target?.startsWith('src/routes/'))
					.map(({ wanted }) => `${file} imports ${wanted}`)
			);
		expect(faults).toEqual([]);
	});

	test('keeps queries out of routes and components', () => {
		const faults = files
			.filter((file) => file.startsWith('src/routes/') || /^src\/lib\/(?!server)/.test(file))
			.flatMap((file) =>
				own(file)
					.filter(
						({ wanted, target, isTypeOnly }) =>
							!isTypeOnly &&
							(/^(drizzle-orm|postgres)(\/|$)/.test(wanted) ||
								target?.startsWith('src/lib/server/db/'))
					)
					.map(({ wanted }) => `${file} imports ${wanted}`)
			);
		expect(faults).toEqual([]);
	});

	test('keeps domain words out of the interface’s own components', () => {
		const faults = files
			.filter((file) => file.startsWith('src/lib/ui/'))
			.flatMap((file) =>
				own(file)
					.filter(
						({ target }) => target?.startsWith('src/lib/') && !/^src\/lib\/(ui|time)\//.test(target)
					)
					.map(({ wanted }) => `${file} imports ${wanted}`)
			);
		expect(faults).toEqual([]);
	});

	test('lets adapters import no feature, but for who may come in', () => {
		const isFeature = (target: string) => {
			const folder = /^src\/lib\/server\/([^/]+)\//.exec(target)?.[1];
			return folder !== undefined && !adapters.includes(folder);
		};
		// Who signs in is a question to the members; what a queue's job does is the feature's.
		const allowed = [
			/^src\/lib\/server\/auth\/.* imports \$lib\/server\/(members|invitations)\//,
			/^src\/lib\/server\/jobs\/work-table\.ts imports /,
			/ imports \$lib\/server\/instance\//
		];
		const faults = files
			.filter((file) => adapters.some((name) => file.startsWith(`src/lib/server/${name}/`)))
			.flatMap((file) =>
				own(file)
					.filter(({ target, isTypeOnly }) => !isTypeOnly && target !== null && isFeature(target))
					.map(({ wanted }) => `${file} imports ${wanted}`)
			)
			.filter((fault) => !allowed.some((pattern) => pattern.test(fault)));
		expect(faults).toEqual([]);
	});
});

test('nothing imports itself in a circle', () => {
	expect(findCycles()).toEqual([]);
});

function findImpure(file: string): string[] {
	const faults: string[] = [];
	const visit = (node: ts.Node): void => {
		if (ts.isPropertyAccessExpression(node)) {
			const text = `${node.expression.getText()}.${node.name.text}`;
			if (text === 'Math.random' || text === 'Date.now' || text === 'performance.now') {
				faults.push(`${file} uses ${text}`);
			}
		}
		if (ts.isNewExpression(node) && node.expression.getText() === 'Date') {
			faults.push(`${file} uses new Date`);
		}
		if (ts.isIdentifier(node) && ['crypto', 'process', 'fetch', 'setTimeout'].includes(node.text)) {
			const isName = ts.isPropertyAccessExpression(node.parent) && node.parent.name === node;
			if (!isName) faults.push(`${file} uses ${node.text}`);
		}
		ts.forEachChild(node, visit);
	};
	visit(parse(file));
	return faults;
}

/** Files that are imported, from file to file, by some. */
function reachFrom(starts: readonly string[]): string[] {
	const reached = new Set(starts);
	for (const file of reached)
		for (const { target } of own(file)) if (target && imports.has(target)) reached.add(target);
	return [...reached];
}

/** Circles among imports that are still there after compiling. */
function findCycles(): string[] {
	const state = new Map<string, 'open' | 'done'>();
	const cycles: string[] = [];
	const visit = (file: string, path: string[]): void => {
		if (state.get(file) === 'done') return;
		if (state.get(file) === 'open') {
			cycles.push([...path.slice(path.indexOf(file)), file].join(' -> '));
			return;
		}
		state.set(file, 'open');
		for (const { target, isTypeOnly } of own(file)) {
			if (target && !isTypeOnly && imports.has(target)) visit(target, [...path, file]);
		}
		state.set(file, 'done');
	};
	for (const file of files) visit(file, []);
	return cycles;
}
