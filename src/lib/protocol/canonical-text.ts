import canonicalize from 'canonicalize';

/** A JSON value as one text (RFC 8785), so that equal values have equal texts. */
export function canonicalText(value: unknown): string {
	return canonicalize(value) ?? 'null';
}
