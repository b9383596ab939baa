import type { DecisionKind } from '$scheduler/policies/policy-memory';
import type { OvalShape } from '$lib/ui/oval-shape';

/** How a decision's person is drawn, by the kind of its block; for roles that see decisions only. */
const ovals: Readonly<Record<DecisionKind, OvalShape>> = {
	baseline: { kind: 'plain' },
	practice: { kind: 'plain' },
	region: { kind: 'hatched' },
	shift: { kind: 'shift' },
	probe: { kind: 'probe' },
	washout: { kind: 'washout' },
	recovery: { kind: 'recovery' },
	maintenance: { kind: 'kept' },
	retention: { kind: 'plain' },
	clamp: { kind: 'plain' },
	transfer: { kind: 'plain' },
	rest: { kind: 'plain' },
	stop: { kind: 'plain' },
	hold: { kind: 'plain' },
	wait: { kind: 'plain' }
};

export function findKindOval(kind: DecisionKind): OvalShape {
	return ovals[kind];
}
