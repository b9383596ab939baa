import { execFileSync, spawnSync } from 'node:child_process';
import { mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { exportJWK, generateKeyPair, type JWK } from 'jose';
import { beforeAll, describe, expect, it } from 'vitest';
import { sealBundle, type BundleContent } from '$lib/server/bundles/seal-bundle';
import { loadSigningKey, type SigningKey } from '$lib/server/keys/signing-key';

const script = new URL('../../static/examples/open_block.py', import.meta.url).pathname;
const content: BundleContent = {
	format: 1,
	participant: 'TW-001',
	visit: 2,
	block: 1,
	rig: 'Gull',
	issuedAt: '2027-03-11T08:00:00.000Z',
	expiresAt: '2027-03-11T12:00:00.000Z',
	protocolHash: 'a'.repeat(64),
	ruleHash: 'b'.repeat(64),
	limits: { minutesPerVisit: 60, trialsPerVisit: 300, variableMax: {} },
	resultUnit: 'm',
	variables: [{ name: 'release_speed', unit: 'm/s', origin: 2.5, scale: 0.1 }],
	plan: { kind: 'practice', parameters: { trials: 60 } },
	fallback: { kind: 'practice', trials: 60 }
};

let folder: string;
let signing: SigningKey;
let rig: JWK;

beforeAll(async () => {
	folder = mkdtempSync(join(tmpdir(), 'ovalry-rig-'));
	signing = await loadSigningKey({
		folder,
		wrappingKey: Buffer.alloc(32, 1).toString('base64url')
	});
	const pair = await generateKeyPair('ECDH-ES', { crv: 'P-256', extractable: true });
	rig = await exportJWK(pair.publicKey);
	writeFileSync(join(folder, 'rig.json'), JSON.stringify(await exportJWK(pair.privateKey)));
	writeFileSync(join(folder, 'server.json'), JSON.stringify(signing.publicJwk));
});

async function openWith(more: string[], sealed?: string) {
	const file = join(folder, 'block.jwe');
	writeFileSync(file, sealed ?? (await sealBundle(content, { signing, rigPublicKey: rig })));
	const keys = ['--rig-key', join(folder, 'rig.json'), '--server-key', join(folder, 'server.json')];
	return spawnSync(
		'/usr/bin/python3',
		[script, file, ...keys, '--now', '2027-03-11T09:00:00Z', ...more],
		{
			encoding: 'utf8'
		}
	);
}

async function openPlan(
	kind: string,
	parameters: Record<string, unknown>,
	variableMax: Record<string, number> = {}
) {
	const limits = { ...content.limits, variableMax };
	const planned = { ...content, limits, plan: { kind, parameters } };
	return openWith([], await sealBundle(planned, { signing, rigPublicKey: rig }));
}

describe('the example that opens a block on its rig', () => {
	it('has the package it needs', () => {
		expect(
			execFileSync('/usr/bin/python3', ['-c', 'import jwcrypto; print("there")'], {
				encoding: 'utf8'
			})
		).toBe('there\n');
	});

	it('opens what was sealed for this rig', async () => {
		const opened = await openWith(['--participant', 'TW-001', '--visit', '2', '--block', '1']);
		expect(opened.stderr).toBe('');
		expect(JSON.parse(opened.stdout)).toEqual(content);
	});

	it.each([
		['another person', ['--participant', 'TW-002'], 'participant TW-001, not TW-002'],
		['another visit', ['--visit', '3'], 'visit 2, not 3'],
		['a time past its end', ['--now', '2027-03-11T12:00:00Z'], 'it expired']
	])('refuses %s', async (_, more, words) => {
		const opened = await openWith(more);
		expect(opened.status).toBe(1);
		expect(opened.stderr).toContain(words);
	});

	const region = { center: [4], shape: [[1]], share: 0.6, stay: 0.2 };
	const rule = { sigma: 0.1, goal: 0.3 };

	it.each<[string, Record<string, unknown>]>([
		['clamp', { trials: 60, feedback: 'clamped-to-noise', clampSd: 0.1 }],
		['transfer', { trials: 60, feedback: 'hidden', targetOffset: 0.2 }],
		['retention', { trials: 60, feedback: 'hidden' }],
		['region', { trials: 60, region }],
		['shift', { trials: 60, rule, level: 0.1 }],
		['shift', { trials: 2, levels: [0.1, 0.2] }]
	])('opens a block of kind %s with all it needs', async (kind, parameters) => {
		const opened = await openPlan(kind, parameters);
		expect(opened.stderr).toBe('');
		expect(JSON.parse(opened.stdout)).toMatchObject({ plan: { kind, parameters } });
	});

	it.each<[string, string, Record<string, unknown>, string]>([
		['a wait', 'wait', {}, 'no block of kind wait'],
		['a kind that it does not know', 'other', { trials: 60 }, 'no block of kind other'],
		['too many trials', 'probe', { trials: 301 }, '301 trials, the limit is 300'],
		['a clamp that does not say what is shown', 'clamp', { trials: 60 }, 'needs feedback'],
		['a shift without a course', 'shift', { trials: 60 }, 'needs rule or levels'],
		['a course shorter than its block', 'shift', { trials: 60, levels: [0.1] }, 'fewer levels'],
		['a transfer without a target', 'transfer', { trials: 60 }, 'needs targetOffset'],
		['a region beyond the rig', 'region', { trials: 60, region }, 'release_speed 2.9, the limit']
	])('refuses %s', async (_, kind, parameters, words) => {
		const opened = await openPlan(kind, parameters, { release_speed: 2.8 });
		expect(opened.status).toBe(1);
		expect(opened.stderr).toContain(words);
	});

	it('refuses a block signed by somebody else', async () => {
		const other = await loadSigningKey({
			folder: mkdtempSync(join(tmpdir(), 'ovalry-other-')),
			wrappingKey: Buffer.alloc(32, 2).toString('base64url')
		});
		const opened = await openWith(
			[],
			await sealBundle(content, { signing: other, rigPublicKey: rig })
		);
		expect(opened.status).toBe(1);
		expect(opened.stderr).toContain('refused');
	});

	it('refuses a file with one byte changed', async () => {
		const sealed = await sealBundle(content, { signing, rigPublicKey: rig });
		const at = sealed.length - 40;
		const changed = sealed.slice(0, at) + (sealed[at] === 'A' ? 'B' : 'A') + sealed.slice(at + 1);
		expect((await openWith([], changed)).status).toBe(1);
	});

	it('gets files of one size whatever is inside', async () => {
		const small = await sealBundle(content, { signing, rigPublicKey: rig });
		const large = await sealBundle(
			{
				...content,
				plan: { kind: 'region', parameters: { trials: 60, region: Array(500).fill(0.123456789) } }
			},
			{ signing, rigPublicKey: rig }
		);
		expect(large.length).toBe(small.length);
	});
});
