/**
 * What the terminal says once everything runs.
 *
 * @param {{ variant: string, origin: string, dataFolder: string, people: object[], setupLink?: string,
 *   mailboxUrl?: string, given: object }} state
 * @returns {string}
 */
export function announcement({
	variant,
	origin,
	dataFolder,
	people,
	setupLink,
	mailboxUrl,
	given
}) {
	const rows = [
		['Open', origin],
		...(setupLink
			? [['Set up your lab', `${setupLink}\n${' '.repeat(20)}(works once, for 30 minutes)`]]
			: []),
		...(mailboxUrl ? [['Mailbox', `${mailboxUrl}  ${mailboxWords(variant)}`]] : []),
		...(given.SMTP_HOST ? [['Mail leaves by', given.SMTP_HOST]] : []),
		['Data', dataFolder]
	];
	return [
		'',
		titles[variant],
		'',
		...rows.map(([name, value]) => `  ${name.padEnd(18)}${value}`),
		...(people.length > 0 ? ['', '  Enter as, on the sign-in page:', ...peopleLines(people)] : []),
		'',
		`  Stop with Ctrl-C.${variant === 'demo' ? ' Make the demo anew: npm start -- --fresh' : ''}`,
		''
	].join('\n');
}

const titles = {
	demo: 'Ovalry runs: the demo. Everybody and every number in it is invented.',
	rehearsal: 'Ovalry runs: a rehearsal on an empty lab, with the demo clock.',
	own: 'Ovalry runs.'
};

function mailboxWords(variant) {
	return variant === 'own'
		? '(no SMTP_HOST is set: mails stay here and reach nobody)'
		: '(every mail stays here)';
}

function peopleLines(people) {
	const width = (key) => Math.max(...people.map((person) => String(person[key] ?? '').length)) + 2;
	const widths = { role: width('role'), name: width('name') };
	return people.map(
		({ role, name, email }) => `    ${role.padEnd(widths.role)}${name.padEnd(widths.name)}${email}`
	);
}
