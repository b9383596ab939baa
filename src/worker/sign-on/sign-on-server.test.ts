import { createHash, randomBytes } from 'node:crypto';
import { createLocalJWKSet, jwtVerify } from 'jose';
import type { AddressInfo, Server } from 'node:net';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createSignOn } from './sign-on-server';

const application = 'http://localhost:3999';
const callback = `${application}/auth/callback/university`;
const people = [{ role: 'Coordinator', name: 'Ida Brandvold', email: 'ida@tidewater.example' }];
let server: Server;
let origin: string;

beforeAll(async () => {
	server = await createSignOn({ port: 1, application, client: 'ovalry', people });
	server.listen(0, '127.0.0.1');
	await new Promise((done) => server.once('listening', done));
	origin = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
});
afterAll(() => void server.close());

const verifier = randomBytes(32).toString('base64url');
const challenge = createHash('sha256').update(verifier).digest('base64url');

function authorizeUrl(more: Record<string, string> = {}): string {
	const query = new URLSearchParams({
		client_id: 'ovalry',
		redirect_uri: callback,
		response_type: 'code',
		scope: 'openid email',
		state: 'state-1',
		nonce: 'nonce-1',
		code_challenge: challenge,
		code_challenge_method: 'S256',
		...more
	});
	return `${origin}/authorize?${query.toString()}`;
}

async function signIn(email: string): Promise<URL> {
	const reply = await fetch(authorizeUrl({ email }), { redirect: 'manual' });
	return new URL(reply.headers.get('location') ?? '');
}

async function exchange(code: string): Promise<{ status: number; body: Record<string, string> }> {
	const body = new URLSearchParams({
		grant_type: 'authorization_code',
		code,
		code_verifier: verifier
	});
	body.set('client_id', 'ovalry');
	const reply = await fetch(`${origin}/token`, { method: 'POST', body });
	return { status: reply.status, body: (await reply.json()) as Record<string, string> };
}

describe('the sign-on stand-in', () => {
	it('says that it is one, and offers the people it knows', async () => {
		const page = await (await fetch(authorizeUrl())).text();
		expect(page).toContain('stands in for a university');
		expect(page).toContain('Ida Brandvold');
	});

	it('lets its form lead back to the application, and nowhere else', async () => {
		const policy = (await fetch(authorizeUrl())).headers.get('content-security-policy');
		expect(policy).toContain(`form-action 'self' ${application}`);
	});

	it('signs the chosen address into a token that its keys verify', async () => {
		const back = await signIn('ida@tidewater.example');
		expect(back.origin + back.pathname).toBe(callback);
		expect(back.searchParams.get('state')).toBe('state-1');
		const { body } = await exchange(back.searchParams.get('code') ?? '');
		const keys = await (await fetch(`${origin}/jwks`)).json();
		const { payload } = await jwtVerify(body.id_token ?? '', createLocalJWKSet(keys));
		expect(payload).toMatchObject({
			email: 'ida@tidewater.example',
			email_verified: true,
			name: 'Ida Brandvold',
			nonce: 'nonce-1',
			aud: 'ovalry'
		});
	});

	it('gives the same person the same subject, and two people two', async () => {
		const subjects = [];
		for (const email of ['ida@tidewater.example', 'IDA@tidewater.example', 'other@lab.example']) {
			const back = await signIn(email);
			const { body } = await exchange(back.searchParams.get('code') ?? '');
			const part = body.id_token?.split('.')[1] ?? '';
			subjects.push(JSON.parse(Buffer.from(part, 'base64url').toString()).sub);
		}
		expect(subjects[0]).toBe(subjects[1]);
		expect(subjects[2]).not.toBe(subjects[0]);
	});

	it('gives nothing for a code that was used or never made', async () => {
		const code = (await signIn('ida@tidewater.example')).searchParams.get('code') ?? '';
		expect((await exchange(code)).status).toBe(200);
		expect((await exchange(code)).status).toBe(400);
		const made = new URLSearchParams({ grant_type: 'authorization_code', code: 'made-up' });
		expect((await fetch(`${origin}/token`, { method: 'POST', body: made })).status).toBe(400);
	});

	it('gives nothing for a password', async () => {
		const body = new URLSearchParams({ grant_type: 'password', username: 'x', password: 'y' });
		expect((await fetch(`${origin}/token`, { method: 'POST', body })).status).toBe(400);
	});

	it('serves its own application only', async () => {
		const elsewhere = await fetch(authorizeUrl({ redirect_uri: 'https://elsewhere.example/x' }));
		expect(elsewhere.status).toBe(400);
		expect((await fetch(authorizeUrl({ client_id: 'other' }))).status).toBe(400);
	});

	it('asks again for what is no e-mail address', async () => {
		const page = await (await fetch(authorizeUrl({ email: 'nobody' }))).text();
		expect(page).toContain('“nobody” is no e-mail address');
	});
});
