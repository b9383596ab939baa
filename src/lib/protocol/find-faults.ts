import type { Fault, RigLimit } from './fault';
import { findBlindingFaults } from './find-blinding-faults';
import { findComparisonFaults } from './find-comparison-faults';
import { findGapFaults } from './find-gap-faults';
import { findPolicyFaults } from './find-policy-faults';
import { findRuleFaults } from './find-rule-faults';
import { findAnalysisFaults } from './analysis/find-analysis-faults';
import { findRelaxationFaults } from './booking/find-relaxation-faults';
import { findInstructionFaults } from './find-instruction-faults';
import { findYokingFaults } from './find-yoking-faults';
import { findDoseFaults } from './limits/find-dose-faults';
import { findEnvelopeFaults } from './limits/find-envelope-faults';
import { findDueBlockFaults } from './policy/find-due-block-faults';
import { findSettingFaults } from './policy/find-setting-faults';
import { findTaskFaults } from './find-task-faults';
import { findVisitFaults } from './find-visit-faults';
import type { ProtocolDraft } from './protocol-draft';

/** Everything that keeps a draft from being frozen, and cautions, in the order of the forms. */
export function findFaults(draft: ProtocolDraft, rigs: readonly RigLimit[]): Fault[] {
	return [
		...findTaskFaults(draft),
		...findVisitFaults(draft, rigs),
		...findBlindingFaults(draft),
		...findYokingFaults(draft),
		...findGapFaults(draft),
		...findRelaxationFaults(draft),
		...findRuleFaults(draft),
		...findSettingFaults(draft),
		...findDueBlockFaults(draft),
		...findPolicyFaults(draft),
		...findComparisonFaults(draft),
		...findAnalysisFaults(draft),
		...findInstructionFaults(draft),
		...findEnvelopeFaults(draft, rigs),
		...findDoseFaults(draft)
	];
}
