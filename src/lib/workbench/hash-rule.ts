import { canonicalJson } from '$scheduler/policies/canonical-json';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';

/** Hash of the rule that a simulation runs: the one under which decisions of this rule are logged. */
export async function hashRule({
	policy,
	guardRails,
	arms
}: Pick<ProtocolContent, 'policy' | 'guardRails' | 'arms'>): Promise<string> {
	const bytes = new TextEncoder().encode(canonicalJson({ policy, guardRails, arms }));
	const digest = await crypto.subtle.digest('SHA-256', bytes);
	return [...new Uint8Array(digest)].map((byte) => byte.toString(16).padStart(2, '0')).join('');
}
