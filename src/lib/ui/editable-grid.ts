/** A column of an EditableGrid. */
export type GridColumn = {
	key: string;
	label: string;
	/** One of these must stand there, or nothing. */
	options?: readonly string[] | undefined;
	isNumber?: boolean | undefined;
	/** Shown, not typed into. */
	isFixed?: boolean | undefined;
};
export type GridRow = { id: string; cells: Readonly<Record<string, string>> };
export type GridPlace = { row: number; column: number };

const steps: Record<string, GridPlace> = {
	ArrowUp: { row: -1, column: 0 },
	ArrowDown: { row: 1, column: 0 },
	ArrowLeft: { row: 0, column: -1 },
	ArrowRight: { row: 0, column: 1 },
	Enter: { row: 1, column: 0 },
	PageUp: { row: -20, column: 0 },
	PageDown: { row: 20, column: 0 },
	Home: { row: 0, column: -1000 },
	End: { row: 0, column: 1000 }
};

/** Where a key leads in a grid of so many rows and columns; null for a key that walks nowhere. */
export function stepPlace(
	{ row, column }: GridPlace,
	key: string,
	{ rows, columns }: { rows: number; columns: number }
): GridPlace | null {
	const step = steps[key];
	if (!step) return null;
	return {
		row: Math.max(0, Math.min(rows - 1, row + step.row)),
		column: Math.max(0, Math.min(columns - 1, column + step.column))
	};
}
