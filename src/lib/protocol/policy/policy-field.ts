/** One setting of the adaptive policy as its form asks for it; the default is the engine's. */
export type PolicyField = {
	/** Where it stands in the policy's settings: 'place.leakMin'. */
	readonly path: string;
	readonly label: string;
	readonly unit?: string;
	/** What it does and what follows when it is changed. */
	readonly help: string;
} & PolicyInput;

type Range = { readonly min: number; readonly max: number; readonly isWhole?: boolean };

export type PolicyInput =
	| ({ readonly kind: 'number' } & Range)
	/** A number, or nothing: then `off` says what happens. */
	| ({ readonly kind: 'optional-number'; readonly off: string } & Range)
	/** Numbers side by side; `ordered` names the order in which they must stand. */
	| ({ readonly kind: 'list'; readonly mayBeEmpty: boolean; readonly most: number } & Range)
	| { readonly kind: 'flag' }
	| {
			readonly kind: 'choice';
			/** An empty value leaves the setting out. */
			readonly options: readonly { readonly value: string; readonly label: string }[];
	  };

export type PolicyGroup = {
	readonly key: string;
	readonly title: string;
	/** One line: when these settings act. */
	readonly about: string;
	readonly fields: readonly PolicyField[];
};

type Words = { label: string; help: string; unit?: string };
type Bounds = readonly [number, number];

/** A number with its range. */
export const real = (path: string, [min, max]: Bounds, words: Words): PolicyField => ({
	...{ path, kind: 'number', min, max },
	...words
});

/** A whole number with its range. */
export const whole = (path: string, [min, max]: Bounds, words: Words): PolicyField => ({
	...{ path, kind: 'number', min, max, isWhole: true },
	...words
});
