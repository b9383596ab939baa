import { SMTPServer } from 'smtp-server';
import type { Envelope, MailStore } from './mail-store';

const largestMailBytes = 25 * 1024 * 1024;

/** Takes every mail it is given and keeps it; for this computer only, so without sign-in and TLS. */
export function createMailTaker(store: MailStore): SMTPServer {
	return new SMTPServer({
		disabledCommands: ['STARTTLS', 'AUTH'],
		authOptional: true,
		size: largestMailBytes,
		disableReverseLookup: true,
		logger: false,
		onData(stream, session, done) {
			const pieces: Buffer[] = [];
			stream.on('data', (piece: Buffer) => pieces.push(piece));
			stream.on('error', done);
			stream.on('end', () => {
				if (stream.sizeExceeded) return done(tooLarge());
				const envelope = readEnvelope(session.envelope);
				store.add(Buffer.concat(pieces), envelope).then(
					() => done(),
					(error: Error) => done(error)
				);
			});
		}
	});
}

type SessionEnvelope = { mailFrom: { address: string } | false; rcptTo: { address: string }[] };

function readEnvelope({ mailFrom, rcptTo }: SessionEnvelope): Envelope {
	return { from: mailFrom ? mailFrom.address : '', to: rcptTo.map(({ address }) => address) };
}

function tooLarge(): Error {
	return Object.assign(new Error('This mail is larger than the mailbox takes'), {
		responseCode: 552
	});
}
