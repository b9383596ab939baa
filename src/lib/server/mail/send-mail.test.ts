import { describe, expect, it } from 'vitest';
import { buildMailMessage } from './mail-message';
import { createMailSender, type MailServer } from './send-mail';
import {
	startDroppingServer,
	startTestMailServer,
	type TestAnswers
} from '../../../../tests/support/test-mail-server';

const mail = () =>
	buildMailMessage({
		from: { name: 'Lab', email: 'lab@ovalry.example' },
		to: { name: 'Anna', email: 'anna@people.example' },
		messageId: '<one@ovalry.example>',
		sentAtMs: 0,
		subject: 'A visit',
		text: 'Hello\n.\nEnd\n',
		html: '<p>Hello</p>',
		language: 'en'
	});

async function outcome(answers: TestAnswers, change: Partial<MailServer> = {}) {
	const server = await startTestMailServer(answers);
	try {
		const sender = createMailSender({ ...server.mailServer, ...change });
		return { result: await sender.send(await mail()), taken: server.taken };
	} finally {
		await server.close();
	}
}

describe('sending (case T19)', () => {
	it('hands over the very bytes it was given, to one recipient', async () => {
		const { result, taken } = await outcome({});
		expect(result).toEqual({ state: 'sent' });
		expect(taken[0]?.from).toBe('lab@ovalry.example');
		expect(taken[0]?.to).toEqual(['anna@people.example']);
		const built = Buffer.from((await mail()).mime);
		expect(taken[0]?.raw.toString()).toBe(built.toString());
	});

	it.each([421, 450, 451])('tries again after %i at the recipient', async (code) => {
		const { result } = await outcome({ atRecipient: code });
		expect(result).toMatchObject({ state: 'retry', reason: 'busy' });
	});

	it('tries again after 451 for the whole mail, which the server did not take', async () => {
		const { result } = await outcome({ afterBody: 451 });
		expect(result).toMatchObject({ state: 'retry', reason: 'busy' });
	});

	it('gives up on an address that does not exist', async () => {
		const { result } = await outcome({ atRecipient: 550 });
		expect(result).toMatchObject({ state: 'permanent', reason: 'address-refused' });
	});

	it('gives up on a mail that is refused whole', async () => {
		const { result } = await outcome({ afterBody: 554 });
		expect(result).toMatchObject({ state: 'permanent', reason: 'message-refused' });
	});

	it('blames its own sign-in, not the address, when that is refused', async () => {
		const { result, taken } = await outcome(
			{ password: 'right' },
			{ user: 'lab', password: 'wrong' }
		);
		expect(result).toMatchObject({ state: 'retry', reason: 'sign-in-refused' });
		expect(taken).toEqual([]);
	});

	it('sends with the right password', async () => {
		const { result } = await outcome({ password: 'right' }, { user: 'lab', password: 'right' });
		expect(result).toEqual({ state: 'sent' });
	});

	it.each(['greeting', 'RCPT', 'DATA'] as const)(
		'tries again when dropped at %s',
		async (point) => {
			const server = await startDroppingServer(point);
			const result = await createMailSender(server.mailServer).send(await mail());
			await server.close();
			expect(result).toMatchObject({ state: 'retry', reason: 'unreachable' });
		}
	);

	it('does not know what happened when dropped after the whole mail', async () => {
		const server = await startDroppingServer('dot');
		const result = await createMailSender(server.mailServer).send(await mail());
		await server.close();
		expect(result).toMatchObject({ state: 'unknown', reason: 'no-answer' });
	});

	it('tries again when nobody listens', async () => {
		const server = await startDroppingServer('dot');
		await server.close();
		const result = await createMailSender(server.mailServer).send(await mail());
		expect(result).toMatchObject({ state: 'retry', reason: 'unreachable' });
	});

	it('tells no password and no address in what it reports', async () => {
		const { result } = await outcome(
			{ password: 'right' },
			{ user: 'lab', password: 'wrong-secret' }
		);
		expect(JSON.stringify(result)).not.toMatch(/wrong-secret|anna@/);
	});
});
