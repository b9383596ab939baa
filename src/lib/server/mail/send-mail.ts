import nodemailer from 'nodemailer';
import type { BuiltMail } from './mail-message';

export interface MailServer {
	host: string;
	port: number;
	/** TLS from the first byte (port 465); otherwise STARTTLS when offered. */
	secure: boolean;
	user?: string | undefined;
	password?: string | undefined;
	/** Signs outgoing mail for the sender's domain. */
	dkim?: { domainName: string; keySelector: string; privateKey: string } | undefined;
	/** How long the server may be silent. Default 60,000 ms. */
	timeoutMs?: number | undefined;
}

/**
 * What became of one attempt.
 * - sent: the server took the mail.
 * - retry: it did not, and may later (busy, unreachable, greylisting, our sign-in refused).
 * - permanent: it never will (no such mailbox, content refused).
 * - unknown: the whole mail went out and no answer came back.
 */
export type SendOutcome =
	| { state: 'sent' }
	| { state: 'retry' | 'permanent' | 'unknown'; reason: SendFault; detail: string };

export type SendFault =
	'unreachable' | 'busy' | 'sign-in-refused' | 'address-refused' | 'message-refused' | 'no-answer';

export interface MailSender {
	send(mail: Pick<BuiltMail, 'envelope' | 'mime'>): Promise<SendOutcome>;
}

export const DKIM_HEADERS =
	'from:to:subject:date:message-id:reply-to:in-reply-to:references:mime-version:content-type:list-unsubscribe:list-unsubscribe-post:auto-submitted';

/** Sends finished mails, one connection each, and says what became of them. */
export function createMailSender(server: MailServer): MailSender {
	return {
		async send({ envelope, mime }) {
			const watch = watchBody();
			const transport = nodemailer.createTransport(transportOptions(server, watch.logger));
			try {
				await transport.sendMail({ envelope, raw: Buffer.from(mime) });
				return { state: 'sent' };
			} catch (error) {
				return outcomeOf(error, watch.isBodySent());
			} finally {
				transport.close();
			}
		}
	};
}

function transportOptions(server: MailServer, logger: BodyLogger) {
	const timeoutMs = server.timeoutMs ?? 60_000;
	const { user, password, dkim } = server;
	return {
		host: server.host,
		port: server.port,
		secure: server.secure,
		// a password never goes over an open line, save to this machine
		requireTLS: !server.secure && user !== undefined && !isLoopback(server.host),
		...(user === undefined ? {} : { auth: { user, pass: password ?? '' } }),
		...(dkim ? { dkim: { ...dkim, headerFieldNames: DKIM_HEADERS } } : {}),
		connectionTimeout: Math.min(timeoutMs, 15_000),
		greetingTimeout: Math.min(timeoutMs, 15_000),
		socketTimeout: timeoutMs,
		disableFileAccess: true,
		disableUrlAccess: true,
		logger
	};
}

/**
 * A dropped connection gives the same error before and after the body was sent; only the log tells
 * them apart: nodemailer logs the body's end with `tnx: 'message'`.
 */
function watchBody() {
	let bodySent = false;
	const watch = (entry: unknown): void => {
		if (isObject(entry) && entry.tnx === 'message') bodySent = true;
	};
	const logger: BodyLogger = {
		level: () => {},
		trace: watch,
		debug: watch,
		info: watch,
		warn: watch,
		error: watch,
		fatal: watch
	};
	return { logger, isBodySent: () => bodySent };
}

type LogLevel = 'level' | 'trace' | 'debug' | 'info' | 'warn' | 'error' | 'fatal';
type BodyLogger = Record<LogLevel, (entry: unknown) => void>;

function outcomeOf(error: unknown, bodySent: boolean): SendOutcome {
	if (!isObject(error) || error instanceof TypeError) throw error;
	const { code, command, responseCode: answer } = error;
	const detail = [code, command, answer].filter((part) => part !== undefined).join(' ');
	if (code === 'EAUTH') return { state: 'retry', reason: 'sign-in-refused', detail };
	if (typeof answer !== 'number') {
		return bodySent
			? { state: 'unknown', reason: 'no-answer', detail }
			: { state: 'retry', reason: 'unreachable', detail };
	}
	if (answer < 500) return { state: 'retry', reason: 'busy', detail };
	const reason = command === 'RCPT TO' ? 'address-refused' : 'message-refused';
	return { state: 'permanent', reason, detail };
}

function isLoopback(host: string): boolean {
	return ['127.0.0.1', '::1', 'localhost'].includes(host);
}

function isObject(value: unknown): value is Record<string, unknown> {
	return typeof value === 'object' && value !== null;
}
