import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import type { ServerResponse } from 'node:http';
import { send } from './page';
import { icon, styleSheet } from './style';

const fonts: Record<string, string> = {
	'/text.woff2':
		'@fontsource-variable/atkinson-hyperlegible-next/files/atkinson-hyperlegible-next-latin-wght-normal.woff2',
	'/heading.woff2':
		'@fontsource-variable/bricolage-grotesque/files/bricolage-grotesque-latin-wght-normal.woff2'
};

/** Sends the style sheet, the icon or a font where the path names one. */
export function sendAsset(path: string, response: ServerResponse): boolean {
	const font = fonts[path];
	if (path === '/style.css') send(response, { type: 'text/css', body: styleSheet });
	else if (path === '/icon.svg') send(response, { type: 'image/svg+xml', body: icon });
	else if (font) sendFont(response, font);
	else return false;
	return true;
}

function sendFont(response: ServerResponse, name: string): void {
	const body = readFileSync(createRequire(import.meta.url).resolve(name));
	const headers = { 'cache-control': 'private, max-age=86400' };
	send(response, { type: 'font/woff2', body, headers });
}
