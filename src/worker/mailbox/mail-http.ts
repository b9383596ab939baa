import { createServer, type Server, type ServerResponse } from 'node:http';
import { sendAsset } from '../local-pages/assets';
import { html, isLocalRequest, page, send } from '../local-pages/page';
import { listPage, mailPage } from './mail-pages';
import type { MailStore } from './mail-store';

/** What a mail's own HTML may do: show itself, and open links in new tabs. No scripts, no loading. */
const mailPolicy = [
	'sandbox allow-popups allow-popups-to-escape-sandbox',
	"default-src 'none'",
	"style-src 'unsafe-inline'",
	'img-src data:',
	"frame-ancestors 'self'"
].join('; ');

/** The mailbox's pages for people, and `/mails` for programs. Reading only. */
export function createMailPages(store: MailStore): Server {
	return createServer((request, response) => {
		if (!isLocalRequest(request)) return send(response, { status: 421, body: 'Use localhost.' });
		if (request.method !== 'GET' && request.method !== 'HEAD') {
			return send(response, {
				status: 405,
				body: 'Reading only.',
				headers: { allow: 'GET, HEAD' }
			});
		}
		const url = new URL(request.url ?? '/', 'http://localhost');
		answer(store, url, response).catch((error: unknown) => {
			console.error(error instanceof Error ? error.message : error);
			send(response, { status: 500, body: 'The mailbox could not read that mail.' });
		});
	});
}

async function answer(store: MailStore, url: URL, response: ServerResponse): Promise<void> {
	const to = url.searchParams.get('to') ?? '';
	if (url.pathname === '/') return send(response, { body: listPage(store.list(to), to) });
	if (url.pathname === '/mails') return sendJson(response, store.list(to));
	if (sendAsset(url.pathname, response)) return;
	const [, id, part, index] =
		/^\/mail\/([\w-]+)(?:\/(html|raw|file)(?:\/(\d+))?)?$/.exec(url.pathname) ?? [];
	const mail = id ? store.find(id) : null;
	if (!mail) return sendNotFound(response);
	if (!part) return send(response, { body: mailPage(mail) });
	if (part === 'html') return sendMailHtml(response, mail.html);
	if (part === 'raw') return sendFile(response, `${mail.id}.eml`, await store.readSource(mail.id));
	const file = await store.readAttachment(mail.id, Number(index));
	return file ? sendFile(response, file.name, file.content) : sendNotFound(response);
}

function sendJson(response: ServerResponse, value: unknown): void {
	send(response, { type: 'application/json', body: JSON.stringify(value) });
}

function sendMailHtml(response: ServerResponse, source: string | null): void {
	if (source === null) return sendNotFound(response);
	const body = `<base target="_blank">${source}`;
	send(response, { body, headers: { 'content-security-policy': mailPolicy } });
}

/** Always saved, never shown: whatever a mail carries, this server does not run it. */
function sendFile(response: ServerResponse, name: string, body: Uint8Array): void {
	const plain = name.replace(/[^\w .-]/g, '_');
	const headers = { 'content-disposition': `attachment; filename="${plain}"` };
	send(response, { type: 'application/octet-stream', body, headers });
}

function sendNotFound(response: ServerResponse): void {
	const body = page(
		'No such mail',
		html`<header>
			<h1>There is no such mail here</h1>
			<p><a href="/">All mails</a></p>
		</header>`
	);
	send(response, { status: 404, body });
}
