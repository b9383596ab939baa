/** The columns of pasted rows, in the order in which they are read when no header row names them. */
export const enrolmentColumns = [
	{ key: 'name', label: 'name', names: ['name', 'full name', 'participant'] },
	{
		key: 'email',
		label: 'e-mail',
		names: ['e-mail', 'email', 'mail', 'e-mail address', 'email address']
	},
	{ key: 'language', label: 'language', names: ['language', 'lang'] },
	{ key: 'zone', label: 'time zone', names: ['time zone', 'timezone', 'zone', 'tz'] },
	{
		key: 'availability',
		label: 'can come',
		names: ['can come', 'availability', 'available', 'when']
	},
	{ key: 'phone', label: 'phone', names: ['phone', 'telephone', 'mobile', 'tel'] },
	{ key: 'code', label: 'code', names: ['code', 'study code', 'participant code', 'id'] }
] as const;

export type EnrolmentColumn = (typeof enrolmentColumns)[number]['key'];

/** What was typed for one person, cell by cell, before anything is made of it. */
export type EnrolmentCells = Record<EnrolmentColumn, string>;

export const emptyCells: EnrolmentCells = {
	name: '',
	email: '',
	language: '',
	zone: '',
	availability: '',
	phone: '',
	code: ''
};

/** What is wrong with one cell, where it stands, and what was probably meant. */
export type CellFault = {
	column: EnrolmentColumn;
	/** Counted from 1, as the coordinator sees it. */
	columnNumber: number;
	columnLabel: string;
	value: string;
	message: string;
	suggestion: string | null;
};

/** One row as checked: nothing typed is lost, whatever is wrong with it. */
export type CheckedRow = { line: number; cells: EnrolmentCells; faults: CellFault[] };

/** How many rows are taken at once. */
export const maxRowCount = 500;
