/** Plain data as JSON can hold it. */
export type JsonValue =
	| null
	| boolean
	| number
	| string
	| readonly JsonValue[]
	| { readonly [name: string]: JsonValue | undefined };
export type JsonObject = { readonly [name: string]: JsonValue | undefined };
