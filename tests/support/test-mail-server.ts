import { generateKeyPairSync } from 'node:crypto';
import type { AddressInfo, Socket } from 'node:net';
import { createServer } from 'node:net';
import { SMTPServer } from 'smtp-server';

/** A mail server on this machine that answers as a test says, and keeps what it took. */
export async function startTestMailServer(answer: TestAnswers = {}) {
	const taken: { from: string; to: string[]; raw: Buffer }[] = [];
	const server = new SMTPServer({
		disabledCommands: ['STARTTLS', ...(answer.password ? [] : ['AUTH'])],
		authOptional: !answer.password,
		allowInsecureAuth: true,
		onAuth: ({ password }, _session, done) =>
			password === answer.password ? done(null, { user: 'lab' }) : done(new Error('no')),
		onRcptTo: (_address, _session, done) =>
			done(answer.atRecipient ? smtpError(answer.atRecipient) : null),
		onData(stream, session, done) {
			const chunks: Buffer[] = [];
			stream.on('data', (chunk: Buffer) => chunks.push(chunk));
			stream.on('end', () => {
				if (answer.afterBody) return done(smtpError(answer.afterBody));
				const { mailFrom, rcptTo } = session.envelope;
				taken.push({
					from: mailFrom ? mailFrom.address : '',
					to: rcptTo.map((party) => party.address),
					raw: Buffer.concat(chunks)
				});
				done();
			});
		}
	});
	await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
	const { port } = server.server.address() as AddressInfo;
	return {
		taken,
		mailServer: { host: '127.0.0.1', port, secure: false },
		close: () => new Promise<void>((resolve) => server.close(() => resolve()))
	};
}

export interface TestAnswers {
	/** SMTP code given at RCPT TO. */
	atRecipient?: number;
	/** SMTP code given after the final dot. */
	afterBody?: number;
	password?: string;
}

/** A mail server that hangs up at a given point of the talk. */
export async function startDroppingServer(dropAt: 'greeting' | 'RCPT' | 'DATA' | 'dot') {
	const server = createServer((socket) => talkUntil(dropAt, socket));
	await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
	const { port } = server.address() as AddressInfo;
	return {
		mailServer: { host: '127.0.0.1', port, secure: false, timeoutMs: 3000 },
		close: () => new Promise<void>((resolve) => server.close(() => resolve()))
	};
}

function talkUntil(dropAt: string, socket: Socket): void {
	socket.on('error', () => {});
	if (dropAt === 'greeting') return void socket.destroy();
	socket.write('220 test\r\n');
	let inBody = false;
	let text = '';
	socket.on('data', (chunk) => {
		text += chunk.toString('latin1');
		if (inBody && text.includes('\r\n.\r\n')) return void socket.destroy();
		if (inBody || !text.endsWith('\r\n')) return;
		const command = text.trim();
		text = '';
		if (command.startsWith(dropAt)) return void socket.destroy();
		inBody = command.startsWith('DATA');
		socket.write(inBody ? '354 go on\r\n' : '250 yes\r\n');
	});
}

export function testDkimKey(): string {
	const { privateKey } = generateKeyPairSync('rsa', { modulusLength: 2048 });
	return privateKey.export({ format: 'pem', type: 'pkcs8' }).toString();
}

function smtpError(responseCode: number): Error {
	return Object.assign(new Error('as the test says'), { responseCode });
}
