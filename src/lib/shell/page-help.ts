export type PageHelp = { text: readonly string[]; keys: readonly { keys: string; does: string }[] };

const anywhere: PageHelp['keys'] = [{ keys: 'Ctrl+K', does: 'find a page or an act' }];

const pages: Record<string, PageHelp> = {
	'/home': {
		text: ['Your studies and what waits in each of them.', 'The most urgent matter stands first.'],
		keys: []
	},
	'/lab': {
		text: ['What the lab has: rooms, rigs, staff, hours and members.', 'Booking needs all of it.'],
		keys: []
	},
	'/studies/[studyId]/protocol/draft': {
		text: [
			'Write the protocol here. Everything is saved as you go, and every step can be taken back.',
			'The ladder shows arms down and visits across. The margin names what is wrong and how to mend it.',
			'An edit in one arm gives that arm blocks of its own. The switch above the ladder changes every arm.'
		],
		keys: [
			{ keys: 'Ctrl+Z', does: 'take back the last step' },
			{ keys: 'Ctrl+Shift+Z', does: 'bring it again' },
			{ keys: 'arrows', does: 'walk over blocks, visits and arms' },
			{ keys: 'E', does: 'edit what you stand at' },
			{ keys: 'N', does: 'a new block' },
			{ keys: 'digits', does: 'write the trials of a block' },
			{ keys: 'Alt+arrows', does: 'move it' },
			{ keys: 'Shift+arrows', does: 'choose several' },
			{ keys: 'Ctrl+C, X, V', does: 'copy, cut, paste' },
			{ keys: 'D', does: 'copy a block, a visit or an arm' },
			{ keys: 'Delete', does: 'remove it' },
			{ keys: '?', does: 'all keys of the ladder' }
		]
	},
	'/studies/[studyId]/protocol': {
		text: [
			'The protocol as it is frozen, with its hash.',
			'A change needs another version. The margin says what still keeps enrolment shut.'
		],
		keys: []
	},
	'/studies/[studyId]/power': {
		text: [
			'How likely the study is to find its effect.',
			'Every assumption stands with its source. A sign-off counts for one version only.'
		],
		keys: []
	},
	'/studies/[studyId]/people/paste': {
		text: [
			'Paste rows of a spreadsheet, one person a line.',
			'Nothing is stored before you say so.'
		],
		keys: []
	},
	'/studies/[studyId]/people': {
		text: [
			'Everybody in the study, each with their way through it.',
			'Choose rows to act on several.'
		],
		keys: [
			{ keys: 'J, K', does: 'go down, go up' },
			{ keys: 'X', does: 'choose a row' },
			{ keys: '/', does: 'search' },
			{ keys: 'P', does: 'paste people' }
		]
	},
	'/studies/[studyId]/calendar': {
		text: [
			'The week of every rig. A visit shows where it may move, and which rule stands against it.',
			'A move sends mail only after you say so.'
		],
		keys: [
			{ keys: 'arrows', does: 'go from visit to visit' },
			{ keys: 'M', does: 'move a visit by keys' }
		]
	},
	'/studies/[studyId]/decisions': {
		text: [
			'What the rule chose for each person, and why.',
			'What the rule may not settle alone waits for an approver.'
		],
		keys: []
	},
	'/studies/[studyId]/visits': {
		text: [
			'The visits of the day: set-up, blocks and trials.',
			'Stop always works, for everybody.'
		],
		keys: []
	},
	'/studies/[studyId]/today': {
		text: [
			'What waits for you today, most urgent first.',
			'Each line says what happens if nobody acts.'
		],
		keys: []
	},
	'/studies/[studyId]/messages': {
		text: ['Mails that left and mails that wait.', 'Nothing is sent twice.'],
		keys: []
	},
	'/studies/[studyId]/allocation': {
		text: [
			'The draw of arms, sealed before the first person comes.',
			'It is opened one person at a time.'
		],
		keys: []
	},
	'/studies/[studyId]/team': {
		text: ['Who does what in this study.', 'Some roles never go together, so that blinding holds.'],
		keys: []
	},
	'/studies/[studyId]/record': {
		text: ['Who did what, and when. Nothing here can be changed or removed.'],
		keys: []
	}
};

const plain: PageHelp = {
	text: ['The sheet holds the work. The margin beside it says why, and what to look out for.'],
	keys: []
};

/** Help for a page by its route: its own, or that of the nearest page above it. */
export function helpForPage(routeId: string | null): PageHelp {
	for (let route = routeId ?? ''; route !== ''; route = route.slice(0, route.lastIndexOf('/'))) {
		const found = pages[route];
		if (found) return { ...found, keys: [...found.keys, ...anywhere] };
	}
	return { ...plain, keys: [...anywhere] };
}

/** Every text of the help, for checking that it reads easily. */
export const helpTexts: readonly string[] = [...Object.values(pages), plain].flatMap(
	({ text, keys }) => [...text, ...keys.map(({ does }) => does)]
);
