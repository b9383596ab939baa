import { describe, expect, it } from 'vitest';
import { readArguments } from '../../../scripts/start/arguments.mjs';
import { describeFailure } from '../../../scripts/start/failure.mjs';
import { readSettings } from '../../../scripts/start/settings.mjs';

type Variant = 'demo' | 'rehearsal' | 'own' | null;

function faultOf(work: () => unknown): string {
	try {
		work();
	} catch (error) {
		return describeFailure(error);
	}
	return 'no fault';
}

const settingsFault = (environment: Record<string, string>, variant: Variant = null) =>
	faultOf(() => readSettings(environment, '/project', variant));

describe('settings of a start', () => {
	it.each([
		['PORT', 'abc', /PORT: must be a whole number from 1 to 65535, is "abc"/],
		['PORT', '70000', /PORT: must be a whole number/],
		['ORIGIN', 'ovalry', /ORIGIN: needs an http address/],
		['DATABASE_URL', 'mysql://x', /DATABASE_URL: needs an address such as postgres:/],
		['AUTH_SECRET', 'short', /AUTH_SECRET: needs at least 32 characters/],
		['OVALRY_WRAPPING_KEY', 'x', /OVALRY_WRAPPING_KEY: needs 32 bytes in base64url/],
		['LOG_LEVEL', 'loud', /LOG_LEVEL: must be silent, error, warn, info or debug/]
	])('names %s when it is "%s"', (name, value, words) => {
		expect(settingsFault({ [name]: value })).toMatch(words);
	});

	it('names all faults at once', () => {
		const words = settingsFault({ PORT: 'x', LOG_LEVEL: 'y' });
		expect(words).toContain('PORT:');
		expect(words).toContain('LOG_LEVEL:');
	});

	it('names a misspelt setting and the one that was meant', () => {
		expect(settingsFault({ OVALRY_DAAT: '/x' })).toContain('Did you mean OVALRY_DATA?');
	});

	it('never repeats a secret', () => {
		const words = settingsFault({
			AUTH_SECRET: 'hush-hush',
			DATABASE_URL: 'mysql://u:hush-hush@h/d'
		});
		expect(words).not.toContain('hush-hush');
	});

	it.each([
		['HOST', '0.0.0.0'],
		['ORIGIN', 'https://ovalry.lab.example'],
		['SMTP_HOST', 'mail.lab.example'],
		['OIDC_ISSUER', 'https://sign-on.university.example']
	])('refuses %s=%s in the demo, and in a rehearsal', (name, value) => {
		expect(settingsFault({ [name]: value })).toContain(`${name}: is ${value}`);
		expect(settingsFault({ [name]: value }, 'rehearsal')).toContain(`${name}: is ${value}`);
	});

	it('listens on 127.0.0.1 in the demo, whatever loopback name is given', () => {
		expect(readSettings({ HOST: 'localhost' }, '/project', null).host).toBe('127.0.0.1');
	});

	it('takes a mail server, a sign-on and an open address for real work', () => {
		const environment = {
			HOST: '0.0.0.0',
			ORIGIN: 'https://ovalry.lab.example',
			SMTP_HOST: 'mail.lab.example',
			MAIL_FROM: 'Tidewater <lab@lab.example>',
			OIDC_ISSUER: 'https://sign-on.university.example',
			OIDC_CLIENT_ID: 'ovalry'
		};
		expect(readSettings(environment, '/project', 'own').host).toBe('0.0.0.0');
	});

	it('asks for what real work needs beside them', () => {
		expect(settingsFault({ HOST: '0.0.0.0' }, 'own')).toContain('ORIGIN: is missing');
		expect(settingsFault({ SMTP_HOST: 'm.example' }, 'own')).toContain('MAIL_FROM: is missing');
		const issuer = { OIDC_ISSUER: 'https://s.example' };
		expect(settingsFault(issuer, 'own')).toContain('OIDC_CLIENT_ID: is missing');
	});
});

describe('arguments of a start', () => {
	it('mean the demo where there are none', () => {
		expect(readArguments([])).toEqual({ variant: null, fresh: false, help: false });
	});

	it('refuse what means nothing, and say what there is', () => {
		const words = faultOf(() => readArguments(['--frsh']));
		expect(words).toContain('"--frsh" means nothing');
		expect(words).toContain('npm start -- --fresh');
	});

	it('refuse two that exclude each other', () => {
		expect(faultOf(() => readArguments(['--empty', '--rehearse']))).toContain('exclude each other');
	});

	it("never let --fresh erase a lab's own database", () => {
		expect(faultOf(() => readArguments(['--empty', '--fresh']))).toContain('would erase');
	});
});
