/** The method sheet writes names with underscores and short units; the engine spells them out. */
const RENAMED: Record<string, string> = {
	gap_h: 'gapHours',
	center_x: 'centerInUnits',
	vars: 'variables'
};

/** Plain data of the method sheet with the engine's names, at every depth. */
export function useEngineNames(value: unknown): unknown {
	if (Array.isArray(value)) return value.map(useEngineNames);
	if (typeof value !== 'object' || value === null) return value;
	return Object.fromEntries(
		Object.entries(value).map(([name, inside]) => [toEngineName(name), useEngineNames(inside)])
	);
}

export function toEngineName(name: string): string {
	return (
		RENAMED[name] ?? name.replace(/_([a-zA-Z0-9])/g, (_, letter: string) => letter.toUpperCase())
	);
}

/** Names whose capital the sheet keeps. */
const WRITTEN: Record<string, string> = { splitD: 'split_D' };

/** Plain data of the engine with the method sheet's names, at every depth. */
export function useSheetNames(value: unknown): unknown {
	if (Array.isArray(value)) return value.map(useSheetNames);
	if (typeof value !== 'object' || value === null) return value;
	return Object.fromEntries(
		Object.entries(value).map(([name, inside]) => [toSheetName(name), useSheetNames(inside)])
	);
}

function toSheetName(name: string): string {
	return (
		WRITTEN[name] ??
		name.replace(/([a-z])([A-Z])/g, (_, a: string, b: string) => `${a}_${b.toLowerCase()}`)
	);
}
