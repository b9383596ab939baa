import { ENGINE_VERSION } from '$scheduler/engine-version';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { canonicalJson, sha256Hex } from '$lib/server/record/canonical-json';

/** By what this process decides: stored with each decision. */
export function currentVersions(policyHash: string) {
	return {
		engineVersion: ENGINE_VERSION,
		runtimeVersion: `node ${process.versions.node}`,
		policyHash
	};
}

/** Hash of the rule that acts: policy settings and guard rails of a frozen version, the same for every arm. */
export function hashPolicy(content: ProtocolContent): string {
	const { policy, guardRails, arms } = content;
	return sha256Hex(canonicalJson({ policy, guardRails, arms }));
}
