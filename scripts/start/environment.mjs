/** What programs may know about the computer; everything else in the caller's environment stays out. */
const inherited = [
	'PATH',
	'LANG',
	'LC_ALL',
	'TMPDIR',
	'NODE_EXTRA_CA_CERTS',
	'SSL_CERT_FILE',
	'SSL_CERT_DIR',
	'HTTP_PROXY',
	'HTTPS_PROXY',
	'NO_PROXY',
	'http_proxy',
	'https_proxy',
	'no_proxy'
];

const mailSettings = [
	'SMTP_HOST',
	'SMTP_PORT',
	'SMTP_USER',
	'SMTP_PASSWORD',
	'SMTP_SECURE',
	'MAIL_FROM'
];
const signOnSettings = ['OIDC_ISSUER', 'OIDC_CLIENT_ID', 'OIDC_CLIENT_SECRET', 'OIDC_LABEL'];

/** Name of Ovalry at its local stand-in for a university's sign-on. */
export const standInClient = 'ovalry-local';

/**
 * The environment of the web server and the worker: exactly what `src/lib/server/config.ts` parses.
 *
 * @param {{
 *   mode: 'demo' | 'own', settings: object, secrets: Record<string, string>, appUrl: string, keys: string,
 *   mailbox?: { smtpPort: number, url: string }, signOn?: { issuer: string }
 * }} plan
 */
export function applicationEnvironment({ mode, settings, secrets, appUrl, keys, mailbox, signOn }) {
	const { given } = settings;
	return {
		...baseEnvironment(),
		...settings.proxy,
		OVALRY_MODE: mode,
		HOST: settings.host,
		PORT: String(settings.port),
		ORIGIN: settings.origin,
		DATABASE_URL: appUrl,
		AUTH_SECRET: given.AUTH_SECRET ?? secrets.authSecret,
		OVALRY_KEYS: keys,
		OVALRY_WRAPPING_KEY: given.OVALRY_WRAPPING_KEY ?? secrets.wrappingKey,
		OVALRY_ALLOCATION_KEY: given.OVALRY_ALLOCATION_KEY ?? secrets.allocationKey,
		BODY_SIZE_LIMIT: settings.proxy.BODY_SIZE_LIMIT ?? '64M',
		// Streams that stay open must not keep the server from ending.
		SHUTDOWN_TIMEOUT: '1',
		...pick(given, [...mailSettings, 'LOG_LEVEL']),
		...(mailbox && mailboxEnvironment(mailbox)),
		...(signOn ? signOnEnvironment(signOn, secrets) : pick(given, signOnSettings))
	};
}

/** What migrations and the seed need on top: the owner's connection and the other roles' passwords. */
export function ownerEnvironment({ ownerUrl, secrets }) {
	return {
		OVALRY_OWNER_URL: ownerUrl,
		OVALRY_APP_PASSWORD: secrets.appPassword,
		OVALRY_RESEARCH_PASSWORD: secrets.researchPassword
	};
}

/** For programs that need no setting: the mailbox and the stand-in. */
export function baseEnvironment() {
	return { ...pick(process.env, inherited), HOME: '/nonexistent', NODE_ENV: 'production' };
}

/** The same database, seen by one of the two roles that own nothing. */
export function urlForRole(ownerUrl, role, password) {
	const url = new URL(ownerUrl);
	url.username = role;
	url.password = password;
	return url.href;
}

function mailboxEnvironment({ smtpPort, url }) {
	return { OVALRY_MAILBOX_SMTP_PORT: String(smtpPort), OVALRY_MAILBOX_URL: url };
}

function signOnEnvironment({ issuer }, secrets) {
	return {
		OIDC_ISSUER: issuer,
		OIDC_CLIENT_ID: standInClient,
		OIDC_CLIENT_SECRET: secrets.signOnSecret,
		OIDC_LABEL: 'a university (stand-in)'
	};
}

function pick(from, names) {
	return Object.fromEntries(names.filter((name) => from[name]).map((name) => [name, from[name]]));
}
