import { html, page, type Html } from '../local-pages/page';
import type { StandInPerson } from './sign-on-server';

type Choice = {
	/** The address that led here, with everything the application asked. */
	url: URL;
	people: StandInPerson[];
	/** What was typed and is no e-mail address; null if nothing was typed yet. */
	fault: string | null;
};

/** Who signs in? One of the demo's people, or any address. */
export function chooserPage({ url, people, fault }: Choice): string {
	const asked = [...url.searchParams].filter(([name]) => name !== 'email');
	const hidden = asked.map(
		([name, value]) => html`<input type="hidden" name="${name}" value="${value}" />`
	);
	return page(
		'Sign-on stand-in',
		html`<header>
				<h1>Sign-on stand-in</h1>
				<p>
					This stands in for a university’s sign-on page. It asks for no password: whoever you
					choose here signs in.
				</p>
			</header>
			<div class="desk">
				<main class="sheet">
					${people.length > 0 ? peopleChoices(asked, people) : ''}
					<section class="typed">
						<h2>${people.length > 0 ? 'Somebody else' : 'Who signs in?'}</h2>
						${fault === null ? '' : html`<p class="fault" role="alert">“${fault}” is no e-mail address. Type one such as name@lab.example.</p>`}
						<form action="/authorize" method="get">
							${hidden}
							<label
								>E-mail address<input
									type="email"
									name="email"
									required
									autocomplete="off"
									value="${fault ?? ''}"
							/></label>
							<button>Sign in with this address</button>
						</form>
					</section>
				</main>
				<aside class="margin" aria-label="About this page">
					<p>
						It runs on this computer only, in a demo or a rehearsal. A lab at work sets OIDC_ISSUER
						to its university’s own sign-on, which checks who you are.
					</p>
				</aside>
			</div>`
	);
}

function peopleChoices(asked: [string, string][], people: StandInPerson[]): Html {
	const items = people.map(({ role, name, email }) => {
		const query = new URLSearchParams([...asked, ['email', email]]);
		return html`<li>
			<a href="/authorize?${query.toString()}"
				><strong>${name}</strong> <span>${role} · ${email}</span></a
			>
		</li>`;
	});
	return html`<h2>Who signs in?</h2>
		<ul class="choices">
			${items}
		</ul>`;
}

export function refusalPage(): string {
	return page(
		'Sign-on stand-in',
		html`<header>
			<h1>This stand-in serves one application only</h1>
			<p>Go back to Ovalry’s sign-in page and choose the university’s sign-on there.</p>
		</header>`
	);
}
