import { existsSync } from 'node:fs';
import { baseEnvironment, standInClient } from './environment.mjs';

/**
 * The programs that make up a running Ovalry, beside PostgreSQL.
 *
 * @param {{
 *   variant: 'demo' | 'rehearsal' | 'own', origin: string, host: string, port: number,
 *   ports: { mailbox: number, signOn: number, smtp: number }, env: Record<string, string>,
 *   mails: string | null, people: string
 * }} plan `mails` is the mailbox's folder, null where a mail server is set; `people` a file that need not exist
 */
export function serviceList({ variant, origin, host, port, ports, env, mails, people }) {
	return [
		{ name: 'worker', what: 'worker', script: 'build/workers/jobs.js', env },
		{ name: 'web', what: 'web server', script: 'build/index.js', env, probe: probeOf(host, port) },
		...(mails === null ? [] : [mailbox(ports, mails)]),
		...(variant === 'own' ? [] : [signOn(ports, origin, people)])
	];
}

function mailbox({ smtp, mailbox: http }, folder) {
	return {
		name: 'mailbox',
		what: 'mailbox',
		script: 'build/workers/mailbox.js',
		words: ['--smtp-port', `${smtp}`, '--http-port', `${http}`, '--folder', folder],
		env: baseEnvironment(),
		probe: `http://127.0.0.1:${http}/`
	};
}

function signOn({ signOn: port }, application, people) {
	const known = existsSync(people) ? ['--people', people] : [];
	return {
		name: 'sign-on',
		what: 'sign-on stand-in',
		script: 'build/workers/sign-on.js',
		words: ['--port', `${port}`, '--application', application, '--client', standInClient, ...known],
		env: baseEnvironment(),
		probe: `http://127.0.0.1:${port}/.well-known/openid-configuration`
	};
}

function probeOf(host, port) {
	const address = ['0.0.0.0', '::', 'localhost'].includes(host) ? '127.0.0.1' : host;
	return `http://${address.includes(':') ? `[${address}]` : address}:${port}/`;
}
