import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { buildIsCurrent } from '../../scripts/start/build.mjs';
import { applicationEnvironment, ownerEnvironment } from '../../scripts/start/environment.mjs';
import { freePort } from '../../scripts/start/ports.mjs';
import { migrate, seed } from '../../scripts/start/prepare-database.mjs';
import { createProcessList } from '../../scripts/start/process-list.mjs';
import { readSecrets } from '../../scripts/start/secrets.mjs';
import { serviceList } from '../../scripts/start/service-list.mjs';
import { createServices } from '../../scripts/start/services.mjs';
import { shutDown } from '../../scripts/start/shutdown.mjs';
import { createDatabase, type TestDatabase } from './create-database';
import { copyDemo, makeHomeFolders } from './demo-template';
import { openMailbox, type Mailbox } from './mailbox';

const checkout = resolve(import.meta.dirname, '../..');

export type Variant = 'demo' | 'rehearsal' | 'own';

export type DemoPerson = { role: string; name: string; email: string };

export type AppServer = {
	/** The address to open; use this one only, its name is part of the CSRF check. */
	origin: string;
	variant: Variant;
	database: TestDatabase;
	mailbox: Mailbox;
	/** Address of the sign-on stand-in; null in the variant `own`. */
	signOnUrl: string | null;
	/** The one-time link of an empty lab; null in the demo. */
	setupLink: string | null;
	/** The demo's people; none in the other variants. */
	people: DemoPerson[];
	/** The environment that web server and worker got. */
	environment: Record<string, string>;
	/** What a service has logged so far. */
	readLog(service: 'web' | 'worker' | 'mailbox' | 'sign-on'): string;
	/** Ends the programs it started, and removes its database and files. */
	stop(): Promise<void>;
};

/**
 * Starts the built application as `npm start` does (web server, worker, mailbox, sign-on stand-in)
 * on free ports and a database of its own, and waits until it answers.
 *
 * @param options.environment more settings for web server and worker, or other values of them
 * @throws if the build is not up to date
 */
export async function startApp(
	variant: Variant,
	options: { environment?: Record<string, string> } = {}
): Promise<AppServer> {
	requireBuild();
	const home = mkdtempSync(join(tmpdir(), 'ovalry-app-'));
	const processes = createProcessList();
	const database = await (variant === 'demo' ? copyDemo(home, makeDemo) : createDatabase());
	makeHomeFolders(home);
	const stop = async () => {
		await shutDown(processes);
		await database.drop();
		rmSync(home, { recursive: true, force: true });
	};
	try {
		const plan = await planApp(variant, home, database);
		const environment = { ...plan.environment, ...options.environment };
		const filling = { variant, plan, environment, database, processes, home };
		const said = variant === 'demo' ? { people: readPeople(home) } : await fill(filling);
		await launch({ variant, plan, environment, processes, home });
		return {
			origin: plan.origin,
			variant,
			database,
			mailbox: openMailbox(plan.mailboxUrl),
			signOnUrl: variant === 'own' ? null : plan.signOnUrl,
			setupLink: 'setupLink' in said ? (said.setupLink ?? null) : null,
			people: said.people ?? [],
			environment,
			readLog: (service) => readFileSync(join(home, 'logs', `${service}.log`), 'utf8'),
			stop
		};
	} catch (error) {
		await stop();
		throw error;
	}
}

/** Makes the demo that all demo servers of this test run are copied from. */
async function makeDemo(home: string, database: TestDatabase): Promise<void> {
	const processes = createProcessList();
	const plan = await planApp('demo', home, database);
	const { environment } = plan;
	await fill({ variant: 'demo', plan, environment, database, processes, home });
}

function readPeople(home: string): DemoPerson[] {
	return JSON.parse(readFileSync(join(home, 'people.json'), 'utf8')) as DemoPerson[];
}

function requireBuild(): void {
	if (buildIsCurrent(checkout)) return;
	throw new Error('build/ is not up to date with the source: npm run build');
}

type Plan = Awaited<ReturnType<typeof planApp>>;

async function planApp(variant: Variant, home: string, database: TestDatabase) {
	const port = await freePort();
	const ports = { mailbox: await freePort(), signOn: await freePort(), smtp: await freePort() };
	const origin = `http://localhost:${port}`;
	const mailboxUrl = `http://localhost:${ports.mailbox}`;
	const signOnUrl = `http://localhost:${ports.signOn}`;
	const secrets = { ...readSecrets(home), appPassword: new URL(database.appUrl).password };
	const environment: Record<string, string> = applicationEnvironment({
		mode: variant === 'own' ? 'own' : 'demo',
		settings: { given: {}, proxy: {}, host: '127.0.0.1', port, origin },
		secrets,
		appUrl: database.appUrl,
		keys: join(home, 'keys'),
		mailbox: { smtpPort: ports.smtp, url: mailboxUrl },
		signOn: variant === 'own' ? undefined : { issuer: signOnUrl }
	});
	return { port, ports, origin, mailboxUrl, signOnUrl, secrets, environment };
}

type Filling = {
	variant: Variant;
	plan: Plan;
	environment: Record<string, string>;
	database: TestDatabase;
	processes: ReturnType<typeof createProcessList>;
	home: string;
};

async function fill({ variant, plan, environment, database, processes, home }: Filling) {
	const { secrets } = plan;
	const research = { ...secrets, researchPassword: new URL(database.researchUrl).password };
	const owner = ownerEnvironment({ ownerUrl: database.ownerUrl, secrets: research });
	const step = { folder: checkout, env: { ...environment, ...owner }, account: {}, processes };
	await migrate(step);
	const said: { people?: DemoPerson[]; setupLink?: string } = await seed({ ...step, variant });
	if (said.people) writeFileSync(join(home, 'people.json'), JSON.stringify(said.people));
	return said;
}

type Launch = Omit<Filling, 'database'>;

async function launch({ variant, plan, environment, processes, home }: Launch): Promise<void> {
	const services = createServices({
		processes,
		folder: checkout,
		account: {},
		logs: join(home, 'logs'),
		say: console.log
	});
	const list = serviceList({
		...plan,
		variant,
		host: '127.0.0.1',
		env: environment,
		mails: join(home, 'mailbox'),
		people: join(home, 'people.json')
	});
	await services.startAll(list);
}
