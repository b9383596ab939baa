import { createHash } from 'node:crypto';
import { createServer, type IncomingMessage, type Server, type ServerResponse } from 'node:http';
import { OAuth2Issuer, OAuth2Service } from 'oauth2-mock-server';
import { sendAsset } from '../local-pages/assets';
import { isLocalRequest, send } from '../local-pages/page';
import { chooserPage, refusalPage } from './sign-on-pages';

export type StandInPerson = { role: string; name: string; email: string };

export type StandIn = {
	port: number;
	/** Origin of the only application that may send people here. */
	application: string;
	client: string;
	people: StandInPerson[];
};

const isEmail = (text: string) => /^[^\s@]+@[^\s@]+$/.test(text);

/** A stand-in for a university's sign-on: OpenID Connect, but nobody is asked for a password. */
export async function createSignOn(options: StandIn): Promise<Server> {
	const issuer = new OAuth2Issuer();
	issuer.url = `http://localhost:${options.port}`;
	await issuer.keys.generate('RS256');
	const service = new OAuth2Service(issuer);
	rememberWhoWasChosen(service, options.people);
	return createServer((request, response) => {
		if (!isLocalRequest(request)) return send(response, { status: 421, body: 'Use localhost.' });
		const url = new URL(request.url ?? '/', 'http://localhost');
		if (sendAsset(url.pathname, response)) return;
		if (url.pathname === '/authorize')
			return authorize({ options, service, url, request, response });
		service.requestHandler(request, response);
	});
}

type Authorization = {
	options: StandIn;
	service: OAuth2Service;
	url: URL;
	request: IncomingMessage;
	response: ServerResponse;
};

/** First visit: the page to choose from. Second, with an address: back to the application. */
function authorize({ options, service, url, request, response }: Authorization): void {
	const target = url.searchParams.get('redirect_uri') ?? '';
	const isKnown = URL.canParse(target) && new URL(target).origin === options.application;
	if (!isKnown || url.searchParams.get('client_id') !== options.client) {
		return send(response, { status: 400, body: refusalPage() });
	}
	const email = url.searchParams.get('email')?.trim() ?? null;
	if (email !== null && isEmail(email)) return void service.requestHandler(request, response);
	// The form's reply leads on to the application, which browsers count as a target of the form.
	const formTargets = [options.application];
	send(response, { body: chooserPage({ url, people: options.people, fault: email }), formTargets });
}

/** Ties the one-time code, and then the access token, to the address that was chosen. */
function rememberWhoWasChosen(service: OAuth2Service, people: StandInPerson[]): void {
	const byCode = new Map<string, string>();
	const byToken = new Map<string, string>();
	const claims = (email: string) => ({
		sub: createHash('sha256').update(email.toLowerCase()).digest('hex').slice(0, 32),
		email,
		email_verified: true,
		name: people.find((person) => person.email === email)?.name ?? email.split('@')[0]
	});
	service.on(
		'beforeAuthorizeRedirect',
		({ url }: { url: URL }, request: { query: { email?: string } }) => {
			const code = url.searchParams.get('code');
			if (code && request.query.email) byCode.set(code, request.query.email.trim());
		}
	);
	service.on('beforeTokenSigning', (token: { payload: object }, request: TokenRequest) => {
		const email = byCode.get(request.body.code ?? '');
		if (email) Object.assign(token.payload, claims(email));
	});
	service.on('beforeResponse', (reply: TokenReply, request: TokenRequest) => {
		const code = request.body.code ?? '';
		const email = byCode.get(code);
		byCode.delete(code);
		if (!email)
			return void Object.assign(reply, { statusCode: 400, body: { error: 'invalid_grant' } });
		byToken.set(String(reply.body.access_token), email);
	});
	service.on('beforeUserinfo', (reply: TokenReply, request: IncomingMessage) => {
		const email = byToken.get((request.headers.authorization ?? '').replace(/^Bearer /i, ''));
		Object.assign(
			reply,
			email ? { body: claims(email) } : { statusCode: 401, body: { error: 'invalid_token' } }
		);
	});
}

type TokenRequest = { body: { code?: string } };
type TokenReply = { statusCode: number; body: Record<string, unknown> };
