import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { announcement } from './announce.mjs';
import { applicationEnvironment, ownerEnvironment, urlForRole } from './environment.mjs';
import { makePrivateFolder } from './folders.mjs';
import { openDatabase } from './open-database.mjs';
import { openHome } from './open-home.mjs';
import { portNear, requireFreePort, freePort } from './ports.mjs';
import { migrate, seed } from './prepare-database.mjs';
import { prepareCheckout } from './prepare.mjs';
import { serviceList } from './service-list.mjs';
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
async function fillDatabase(state, target) {
	const { variant, ownerUrl, folder, isNew, mayBeHalfSeeded = false } = target;
	const { accounts, processes, say } = state;
	mkdirSync(folder, { recursive: true, mode: 0o755 });
	const env = {
		...environmentFor(state, { variant, ownerUrl, folder }),
		...ownerEnvironment({ ownerUrl, ...state })
	};
	const step = { folder: state.folder, env, account: accounts.application, processes };
	if (isNew && variant === 'demo') say('Making the demo');
	await migrate(step);
	if (variant === 'demo' && !isNew && !mayBeHalfSeeded) return {};
	const said = await seed({ ...step, variant, report: (line) => say(`  ${line}`) });
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
	return serviceList({
		...settings,
		variant: database.variant,
		ports,
		env: environmentFor(state, database),
		people: join(database.folder, 'people.json'),
		mails: usesMailbox(settings)
			? makePrivateFolder(join(database.folder, 'mailbox'), accounts.application)
			: null
	});
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
