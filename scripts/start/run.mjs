import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { announcement } from './announce.mjs';
import {
	applicationEnvironment,
	baseEnvironment,
	ownerEnvironment,
	standInClient,
	urlForRole
} from './environment.mjs';
import { makePrivateFolder } from './folders.mjs';
import { openDatabase } from './open-database.mjs';
import { openHome } from './open-home.mjs';
import { portNear, requireFreePort, freePort } from './ports.mjs';
import { migrate, seed } from './prepare-database.mjs';
import { prepareCheckout } from './prepare.mjs';
import { createServices } from './services.mjs';
import { readSettings } from './settings.mjs';
import { stageApplication } from './stage.mjs';

/**
 * The way of a start, step by step. Returns never by itself: it ends by a signal, or throws when
 * a service cannot be kept running.
 */
export async function runOvalry({ checkout, choice, processes, say, onLock }) {
	const settings = readSettings(process.env, checkout, choice.variant);
	const place = await openHome({ settings, processes, say, onLock });
	await requireFreePort(settings.port, settings.host);
	await prepareCheckout({ checkout, processes, say });
	const { home, accounts } = place;
	const folder = await stageApplication({
		checkout,
		home,
		account: accounts.application,
		processes,
		say
	});
	const ports = await choosePorts(settings.port);
	const state = { ...place, settings, choice, processes, say, folder, ports };
	const database = await openDatabase(state, (target) => fillDatabase(state, target));
	const services = createServices({
		processes,
		folder,
		account: accounts.application,
		logs: place.logs,
		say
	});
	await services.startAll(listServices(state, database));
	place.lock.update({ address: settings.origin });
	say(announcement({ ...wordsAbout(state, database), dataFolder: home }));
	await Promise.race([services.failed, database.ended]);
}

async function choosePorts(port) {
	return {
		mailbox: await portNear(port + 1),
		signOn: await portNear(port + 2),
		smtp: await freePort()
	};
}

/** Migrates and seeds one database; leaves what the seed said in the variant's folder. */
async function fillDatabase(state, { variant, ownerUrl, folder, isNew }) {
	const { accounts, processes, say } = state;
	mkdirSync(folder, { recursive: true, mode: 0o755 });
	const env = {
		...environmentFor(state, { variant, ownerUrl, folder }),
		...ownerEnvironment({ ownerUrl, ...state })
	};
	const step = { folder: state.folder, env, account: accounts.application, processes };
	if (isNew && variant === 'demo') say('Making the demo');
	await migrate(step);
	if (variant === 'demo' && !isNew) return {};
	const said = await seed({ ...step, variant });
	if (said.people)
		writeFileSync(join(folder, 'people.json'), JSON.stringify(said.people), { mode: 0o644 });
	return said;
}

/** The application's environment on one database. */
function environmentFor(state, { variant, ownerUrl, folder }) {
	const { settings, secrets, ports, accounts } = state;
	return applicationEnvironment({
		mode: variant === 'own' ? 'own' : 'demo',
		settings,
		secrets,
		appUrl: urlForRole(ownerUrl, 'ovalry_app', secrets.appPassword),
		keys: makePrivateFolder(join(folder, 'keys'), accounts.application),
		mailbox: usesMailbox(settings) ? { smtpPort: ports.smtp, url: mailboxUrl(state) } : undefined,
		signOn: variant === 'own' ? undefined : { issuer: `http://localhost:${ports.signOn}` }
	});
}

const usesMailbox = (settings) => !settings.given.SMTP_HOST;
const mailboxUrl = ({ ports }) => `http://localhost:${ports.mailbox}`;

function listServices(state, database) {
	const { settings, ports, accounts } = state;
	const env = environmentFor(state, database);
	const all = [
		{ name: 'worker', what: 'worker', script: 'build/workers/jobs.js', env },
		{ name: 'web', what: 'web server', script: 'build/index.js', env, probe: probeOf(settings) }
	];
	if (usesMailbox(settings)) {
		const mails = makePrivateFolder(join(database.folder, 'mailbox'), accounts.application);
		const words = ['--smtp-port', ports.smtp, '--http-port', ports.mailbox, '--folder', mails].map(
			String
		);
		all.push(standIn('mailbox', 'mailbox', words, `http://127.0.0.1:${ports.mailbox}/`));
	}
	if (database.variant !== 'own') {
		const people = join(database.folder, 'people.json');
		const words = [
			'--port',
			ports.signOn,
			'--application',
			settings.origin,
			'--client',
			standInClient
		].map(String);
		if (existsSync(people)) words.push('--people', people);
		const probe = `http://127.0.0.1:${ports.signOn}/.well-known/openid-configuration`;
		all.push(standIn('sign-on', 'sign-on stand-in', words, probe));
	}
	return all;
}

function standIn(name, what, words, probe) {
	return { name, what, script: `build/workers/${name}.js`, words, env: baseEnvironment(), probe };
}

function probeOf({ host, port }) {
	const address = ['0.0.0.0', '::', 'localhost'].includes(host) ? '127.0.0.1' : host;
	return `http://${address.includes(':') ? `[${address}]` : address}:${port}/`;
}

function wordsAbout(state, { variant, said, folder }) {
	const people = join(folder, 'people.json');
	return {
		variant,
		origin: state.settings.origin,
		given: state.settings.given,
		people: existsSync(people) ? JSON.parse(readFileSync(people, 'utf8')) : [],
		setupLink: said.setupLink,
		mailboxUrl: usesMailbox(state.settings) ? mailboxUrl(state) : undefined
	};
}
