import canonicalize from 'canonicalize';

/**
 * Plain data as text that is the same for equal data: names sorted, numbers in their shortest form.
 *
 * Source:  RFC 8785 (JSON Canonicalization Scheme), package canonicalize.
 * @throws {TypeError} data that JSON cannot hold, such as NaN
 * @example canonicalJson({ b: 1, a: [true] }) // '{"a":[true],"b":1}'
 */
export function canonicalJson(value: unknown): string {
	const text = canonicalize(value);
	if (text === undefined) throw new TypeError('this value has no JSON form');
	return text;
}

/** A copy with nothing that JSON would not keep: no undefined, no shared parts. */
export function toPlainData(value: unknown): unknown {
	return JSON.parse(canonicalJson(value));
}
