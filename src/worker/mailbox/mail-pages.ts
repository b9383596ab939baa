import { html, page, type Html } from '../local-pages/page';
import type { CalendarEvent } from './calendar-part';
import type { StoredMail } from './mail-store';

const shownAtMost = 200;

/** The list of mails, newest first, for everybody or one address. */
export function listPage(mails: StoredMail[], to: string): string {
	const shown = mails.slice(0, shownAtMost);
	const rows = shown.map(
		(mail) =>
			html`<tr>
				<td class="when">${formatInstant(mail.sentAt ?? mail.receivedAt)}</td>
				<td>${mail.envelope.to.join(', ')}</td>
				<td><a href="/mail/${mail.id}">${mail.subject}</a> ${calendarMark(mail)}</td>
			</tr>`
	);
	const table = html`<table>
		<thead>
			<tr>
				<th scope="col">Sent</th>
				<th scope="col">To</th>
				<th scope="col">Subject</th>
			</tr>
		</thead>
		<tbody>
			${rows}
		</tbody>
	</table>`;
	const more = mails.length - shown.length;
	return page(
		'Mailbox',
		frame({
			title: 'Mailbox',
			lead: 'Every mail that Ovalry sends on this computer ends here. None goes any further.',
			sheet: html`${shown.length > 0 ? table : emptyWords(to)}
			${more > 0 ? html`<p>${more} older mails are kept but not shown. Look for an address to see them.</p>` : ''}`,
			margin: listMargin(mails.length, to)
		})
	);
}

function listMargin(count: number, to: string): Html {
	return html`<form action="/" method="get">
			<label>Only mails to<input name="to" value="${to}" autocomplete="off" /></label>
			<button>Show them</button>
		</form>
		<p>
			${count}
			${count === 1 ? 'mail' : 'mails'}${to ? html` to “${to}”. <a href="/">Show all</a>` : ''}
		</p>
		<p><a href="/${to ? `?to=${encodeURIComponent(to)}` : ''}">Look again for new mail</a></p>
		<p>Times are what the mails themselves say; in a demo that is the demo clock.</p>`;
}

function emptyWords(to: string): Html {
	if (to) return html`<p>No mail to “${to}” so far.</p>`;
	return html`<p>
		No mail so far. Ask for a sign-in link, invite a member or book a visit, and it arrives here.
	</p>`;
}

/** One mail: its text, its HTML in a closed frame, its calendar part decoded, its files. */
export function mailPage(mail: StoredMail): string {
	return page(
		`${mail.subject} – Mailbox`,
		frame({
			title: mail.subject,
			lead: html`<a href="/">All mails</a>`,
			sheet: html`<h2>Text</h2>
				<pre>${linkify(mail.text || '(no text part)')}</pre>
				${mail.calendar ? calendarSection(mail) : ''} ${mail.html ? htmlSection(mail) : ''}`,
			margin: html`<dl>
					<dt>From</dt>
					<dd>${mail.from}</dd>
					<dt>To</dt>
					<dd>${mail.to.join(', ')}</dd>
					<dt>Delivered to</dt>
					<dd>${mail.envelope.to.join(', ')}</dd>
					<dt>Sent</dt>
					<dd class="number">${mail.sentAt ? formatInstant(mail.sentAt) : 'not said'}</dd>
					<dt>Arrived</dt>
					<dd class="number">${formatInstant(mail.receivedAt)}</dd>
				</dl>
				${fileList(mail)}
				<p>
					<a href="/mail/${mail.id}/raw" download="${mail.id}.eml">Save the mail as received</a>
				</p>`
		})
	);
}

function htmlSection(mail: StoredMail): Html {
	return html`<section>
		<h2>As a mail program shows it</h2>
		<iframe
			title="The mail's HTML part"
			src="/mail/${mail.id}/html"
			sandbox="allow-popups allow-popups-to-escape-sandbox"
		></iframe>
	</section>`;
}

function calendarSection({ calendar }: StoredMail): Html {
	if (!calendar) return html``;
	return html`<section>
		<h2>Calendar part</h2>
		<p>Method <strong>${calendar.method ?? 'none'}</strong></p>
		${calendar.events.map(eventDetails)}
		<details>
			<summary>As sent</summary>
			<pre>${calendar.source}</pre>
		</details>
	</section>`;
}

function eventDetails(event: CalendarEvent): Html {
	const attendees = event.attendees.map(
		({ address, answer }) =>
			`${address} (${(answer ?? 'no answer').toLowerCase().replace('-', ' ')})`
	);
	const rows: [string, string | number | null][] = [
		['Summary', event.summary],
		['Start', formatEventTime(event.start)],
		['End', event.end && formatEventTime(event.end)],
		['Sequence', event.sequence],
		['Status', event.status],
		['Place', event.location],
		['Organizer', event.organizer],
		['Attendees', attendees.join(', ')],
		['Event id', event.uid]
	];
	const filled = rows.filter(([, value]) => value !== null && value !== '');
	return html`<dl>
		${filled.map(
			([name, value]) =>
				html`<dt>${name}</dt>
					<dd class="number">${value}</dd>`
		)}
	</dl>`;
}

function fileList(mail: StoredMail): Html {
	if (mail.attachments.length === 0) return html``;
	const items = mail.attachments.map(
		({ name, type, byteCount }, index) =>
			html`<dd>
				<a href="/mail/${mail.id}/file/${index}" download="${name}">${name}</a> ${type},
				${byteCount} bytes
			</dd>`
	);
	return html`<dl>
		<dt>Files</dt>
		${items}
	</dl>`;
}

function calendarMark({ calendar }: StoredMail): Html {
	if (!calendar) return html``;
	const words: Record<string, string> = {
		REQUEST: 'invitation',
		CANCEL: 'cancellation',
		REPLY: 'answer'
	};
	return html`<span class="mark">${words[calendar.method ?? ''] ?? 'calendar'}</span>`;
}

type Frame = { title: string; lead: Html | string; sheet: Html; margin: Html };

function frame({ title, lead, sheet, margin }: Frame): Html {
	return html`<header>
			<h1>${title}</h1>
			<p>${lead}</p>
		</header>
		<div class="desk">
			<main class="sheet">${sheet}</main>
			<aside class="margin" aria-label="About this">${margin}</aside>
		</div>`;
}

/** Addresses in the text become links; everything else stays text. */
function linkify(text: string): Html[] {
	const pieces = text.split(/(https?:\/\/[^\s<>"']*[^\s<>"'.,;:)\]])/);
	return pieces.map((piece, i) =>
		i % 2 === 0 ? html`${piece}` : html`<a href="${piece}" rel="noreferrer">${piece}</a>`
	);
}

const clock = new Intl.DateTimeFormat('en-GB', {
	dateStyle: 'medium',
	timeStyle: 'short',
	timeZone: 'UTC'
});

function formatInstant(iso: string): string {
	return `${clock.format(new Date(iso))} UTC`;
}

/** UTC in words; a time in a named zone as the calendar gives it. */
function formatEventTime(time: string): string {
	return time.endsWith('Z') ? formatInstant(time) : time;
}
