import type { IncomingMessage, ServerResponse } from 'node:http';

/** A piece of HTML that is already escaped. */
export type Html = { readonly html: string };

/** Writes HTML with every inserted value escaped, but for pieces that are HTML themselves. */
export function html(parts: TemplateStringsArray, ...values: HtmlValue[]): Html {
	const inserted = values.map(toHtml);
	return { html: parts.map((part, i) => part + (inserted[i] ?? '')).join('') };
}

type HtmlValue = Html | string | number | null | undefined | HtmlValue[];

function toHtml(value: HtmlValue): string {
	if (value === null || value === undefined) return '';
	if (Array.isArray(value)) return value.map(toHtml).join('');
	return typeof value === 'object' ? value.html : escapeHtml(String(value));
}

const entities: Record<string, string> = {
	'&': '&amp;',
	'<': '&lt;',
	'>': '&gt;',
	'"': '&quot;',
	"'": '&#39;'
};

export function escapeHtml(text: string): string {
	return text.replace(/[&<>"']/g, (character) => entities[character] ?? character);
}

/** A whole page of the local programs: a sheet and its margin, without scripts. */
export function page(title: string, body: Html): string {
	return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>${escapeHtml(title)}</title>
<link rel="stylesheet" href="/style.css">
<link rel="icon" href="/icon.svg" type="image/svg+xml">
</head>
<body>
${body.html}
</body>
</html>
`;
}

const policy = [
	"default-src 'none'",
	"style-src 'self'",
	"img-src 'self'",
	"font-src 'self'",
	"frame-src 'self'",
	"base-uri 'none'",
	"frame-ancestors 'none'"
];

export type Reply = {
	status?: number;
	type?: string;
	body: string | Uint8Array;
	/** Where forms of this page may go, beside this server itself. */
	formTargets?: string[];
	headers?: Record<string, string>;
};

/** Sends a reply with the headers that every page of the local programs carries. */
export function send(response: ServerResponse, reply: Reply): void {
	const forms = `form-action ${["'self'", ...(reply.formTargets ?? [])].join(' ')}`;
	response.writeHead(reply.status ?? 200, {
		'content-type': reply.type ?? 'text/html; charset=utf-8',
		'content-security-policy': [...policy, forms].join('; '),
		'x-content-type-options': 'nosniff',
		'referrer-policy': 'no-referrer',
		'cross-origin-resource-policy': 'same-origin',
		'cache-control': 'no-store',
		...reply.headers
	});
	response.end(reply.body);
}

/**
 * Is this server spoken to by its own loopback name? Another name that was made to point here (a
 * page elsewhere can do that) must not read what it serves.
 */
export function isLocalRequest(request: IncomingMessage): boolean {
	const host = request.headers.host ?? '';
	return /^(localhost|127\.0\.0\.1|\[::1\])(:\d+)?$/.test(host);
}
