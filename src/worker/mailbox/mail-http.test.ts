import { mkdtemp, rm } from 'node:fs/promises';
import { request } from 'node:http';
import type { AddressInfo, Server } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createMailPages } from './mail-http';
import { openMailStore } from './mail-store';

let folder: string;
let server: Server;
let origin: string;
let id: string;

beforeAll(async () => {
	folder = await mkdtemp(join(tmpdir(), 'ovalry-mails-'));
	const store = await openMailStore(folder);
	const source = [
		'Subject: <b>bold</b> & "quoted"',
		'MIME-Version: 1.0',
		'Content-Type: text/html; charset=utf-8',
		'',
		'<p>Hello</p><script>document.title = "ran"</script><img src="https://tracker.example/x.png">'
	].join('\r\n');
	({ id } = await store.add(Buffer.from(source), { from: 'a@lab.example', to: ['b@lab.example'] }));
	server = createMailPages(store).listen(0, '127.0.0.1');
	await new Promise((done) => server.once('listening', done));
	origin = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
});

afterAll(async () => {
	server.close();
	await rm(folder, { recursive: true, force: true });
});

describe("the mailbox's pages", () => {
	it('escape what a mail says', async () => {
		const page = await (await fetch(`${origin}/`)).text();
		expect(page).toContain('&lt;b&gt;bold&lt;/b&gt; &amp; &quot;quoted&quot;');
		expect(page).not.toContain('<b>bold</b>');
	});

	it('allow no script, no frame around them and no referrer', async () => {
		const { headers } = await fetch(`${origin}/mail/${id}`);
		expect(headers.get('content-security-policy')).toContain("default-src 'none'");
		expect(headers.get('content-security-policy')).toContain("frame-ancestors 'none'");
		expect(headers.get('referrer-policy')).toBe('no-referrer');
	});

	it("show a mail's own HTML in a closed box that loads nothing", async () => {
		const policy = (await fetch(`${origin}/mail/${id}/html`)).headers.get(
			'content-security-policy'
		);
		expect(policy).toMatch(/^sandbox /);
		expect(policy).not.toContain('allow-scripts');
		expect(policy).toContain("default-src 'none'");
	});

	it('hand out attachments and sources as files to save, never to show', async () => {
		const { headers } = await fetch(`${origin}/mail/${id}/raw`);
		expect(headers.get('content-type')).toBe('application/octet-stream');
		expect(headers.get('content-disposition')).toMatch(/^attachment/);
	});

	it('answer only to their own loopback name', async () => {
		expect(await statusWithHost('mailbox.elsewhere.example')).toBe(421);
		expect(await statusWithHost('localhost:1234')).toBe(200);
	});

	it('take no other method than reading', async () => {
		expect((await fetch(`${origin}/mails`, { method: 'POST' })).status).toBe(405);
	});

	it('give programs the same mails as JSON', async () => {
		const mails = (await (await fetch(`${origin}/mails?to=b@lab.example`)).json()) as {
			id: string;
		}[];
		expect(mails.map((mail) => mail.id)).toEqual([id]);
	});

	it('answer 404 for a mail that is not there', async () => {
		expect((await fetch(`${origin}/mail/nothing`)).status).toBe(404);
		expect((await fetch(`${origin}/mail/${id}/file/7`)).status).toBe(404);
	});
});

function statusWithHost(host: string): Promise<number | undefined> {
	return new Promise((done, fail) => {
		const call = request(`${origin}/`, { headers: { host } }, (reply) => {
			reply.resume();
			done(reply.statusCode);
		});
		call.once('error', fail).end();
	});
}
