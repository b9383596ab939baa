/** One column of a DataTable. */
export interface Column<Row> {
	key: string;
	label: string;
	text?: ((row: Row) => string | number) | undefined;
	/** Numbers stand right. */
	align?: 'left' | 'right';
	/** Numbers, times and codes are written in the tabular mono. */
	mono?: boolean;
	/** The cell that names its row. */
	rowHeader?: boolean;
	/** Left out on a phone. */
	wideOnly?: boolean;
	hideLabel?: boolean;
	width?: string | undefined;
	sorted?: 'ascending' | 'descending' | undefined;
	sortHref?: string | undefined;
}
