import { isValidZone, suggestZone } from '$lib/time/is-valid-zone';
import { readAvailability, type WeeklyStretch } from './availability';
import {
	enrolmentColumns,
	type CellFault,
	type EnrolmentCells,
	type EnrolmentColumn
} from './enrolment-columns';

/** A person as they will be enrolled. */
export type PersonToEnrol = {
	name: string;
	email: string;
	phone: string;
	language: string;
	zone: string;
	availability: WeeklyStretch[];
	/** A code that the lab gave already; empty for the study's next one. */
	code: string;
};

/** What empty cells stand for: the lab's own. */
export type CellDefaults = { zone: string; language: string };

export type CellsAnswer = { ok: true; person: PersonToEnrol } | { ok: false; faults: CellFault[] };

/** Reads one row's cells; every fault is named, not only the first. */
export function checkCells(cells: EnrolmentCells, defaults: CellDefaults): CellsAnswer {
	const zone = cells.zone.trim() || defaults.zone;
	const language = cells.language.trim().toLowerCase() || defaults.language;
	const availability = readAvailability(cells.availability);
	const faults = [
		nameFault(cells),
		emailFault(cells),
		isLanguage(language) ? null : makeFault('language', cells, languageHint(language)),
		isValidZone(zone) ? null : makeFault('zone', cells, zoneHint(zone), suggestZone(zone)),
		availability.ok ? null : makeFault('availability', cells, availability.message),
		phoneFault(cells),
		codeFault(cells)
	].filter((fault) => fault !== null);
	if (faults.length > 0 || !availability.ok) return { ok: false, faults };
	const [name, email, phone] = [cells.name, cells.email, cells.phone].map(tidy);
	const person = { name: name ?? '', email: email ?? '', phone: phone ?? '', language, zone };
	const code = cells.code.trim();
	return { ok: true, person: { ...person, availability: availability.windows, code } };
}

/** A fault of one cell with its place, as the list of faults shows it. */
export function makeFault(
	column: EnrolmentColumn,
	cells: EnrolmentCells,
	message: string,
	suggestion?: string
): CellFault {
	const index = enrolmentColumns.findIndex(({ key }) => key === column);
	return {
		column,
		columnNumber: index + 1,
		columnLabel: enrolmentColumns[index]?.label ?? column,
		value: cells[column],
		message,
		suggestion: suggestion ?? null
	};
}

function nameFault(cells: EnrolmentCells): CellFault | null {
	const name = tidy(cells.name);
	if (name === '') return makeFault('name', cells, 'is empty');
	if (name.length > 200) return makeFault('name', cells, 'has more than 200 letters');
	return null;
}

function emailFault(cells: EnrolmentCells): CellFault | null {
	const message = findEmailFault(tidy(cells.email));
	return message ? makeFault('email', cells, message) : null;
}

/** What is wrong with an e-mail address, in words that say how to mend it; null when nothing is. */
export function findEmailFault(email: string): string | null {
	if (email === '') return 'is empty';
	if (email.length > 254) return 'has more than 254 letters';
	if (/\s/.test(email)) return 'has a space inside';
	const [local = '', domain, extra] = email.split('@');
	if (domain === undefined) return 'has no @, such as name@mail.example';
	if (extra !== undefined) return 'has more than one @';
	if (local === '') return 'nothing before the @';
	if (domain === '') return 'nothing after the @, such as mail.example';
	if (!domain.includes('.')) return `nothing after “${domain}”, such as .example`;
	const labels = domain.split('.');
	if (labels.some((label) => label === '')) return 'has two dots in a row, or one at the end';
	const isPlain = /^[\p{L}\p{N}.!#$%&'*+/=?^_`{|}~-]+$/u.test(local) && !/^\.|\.\.|\.$/.test(local);
	const isDomain = labels.every((label) => /^(?!-)[\p{L}\p{N}-]{1,63}(?<!-)$/u.test(label));
	return isPlain && isDomain ? null : 'has a sign that no address has';
}

function phoneFault(cells: EnrolmentCells): CellFault | null {
	const phone = tidy(cells.phone);
	if (phone === '' || /^\+?[\d\s()/.-]{4,30}$/.test(phone)) return null;
	return makeFault('phone', cells, 'is no telephone number, such as +351 21 000 0000');
}

function codeFault(cells: EnrolmentCells): CellFault | null {
	const code = cells.code.trim();
	if (code === '' || /^[A-Za-z0-9][A-Za-z0-9._-]{0,19}$/.test(code)) return null;
	return makeFault(
		'code',
		cells,
		'is no code: up to 20 letters, digits, dots, hyphens or underscores'
	);
}

function isLanguage(code: string): boolean {
	return languageName(code) !== null;
}

/** The English name of a language code; null when there is no such language. */
export function languageName(code: string): string | null {
	if (!/^[a-z]{2,3}(-[a-z0-9]{2,8})*$/i.test(code)) return null;
	const name = new Intl.DisplayNames(['en'], { type: 'language', fallback: 'none' }).of(code);
	return name ?? null;
}

function languageHint(language: string): string {
	return `no such language: “${language}”. A code of two letters, such as en or pt`;
}

function zoneHint(zone: string): string {
	return suggestZone(zone) ? 'no such zone' : 'no such zone; a name such as Europe/Lisbon';
}

function tidy(text: string): string {
	return text.normalize('NFC').replaceAll(/\s+/g, ' ').trim();
}
