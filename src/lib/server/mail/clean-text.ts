/** Characters that end a line somewhere, steer a terminal or turn the reading direction around. */
const CONTROL =
	/[\u0000-\u0008\u000B\u000C\u000E-\u001F\u007F-\u009F\u2028\u2029\u202A-\u202E\u2066-\u2069]/g;

/** Text of several lines for a description or a place: line feeds only, no control characters. */
export function cleanText(text: string): string {
	return text
		.replace(/\p{Surrogate}/gu, '\uFFFD')
		.replace(/\r\n?/g, '\n')
		.replace(CONTROL, ' ');
}

/** One line for a title, a subject or a name. */
export function cleanLine(text: string): string {
	return cleanText(text)
		.replace(/[\n\t]+/g, ' ')
		.trim();
}

/** A person's name where a calendar writes it between quotes: those cannot be escaped there. */
export function cleanName(text: string): string {
	return cleanLine(text).replace(/"/g, "'");
}

const ADDRESS = /^[^\s@<>(),;:\\"[\]\p{C}]+@[^\s@<>(),;:\\"[\]\p{C}]+\.[^\s@<>(),;:\\"[\]\p{C}]+$/u;

/** An address that is safe in a header and a calendar. @throws TypeError when it is not. */
export function checkedAddress(address: string): string {
	if (address.length <= 254 && ADDRESS.test(address)) return address;
	throw new TypeError('Not an e-mail address that can be written to');
}
