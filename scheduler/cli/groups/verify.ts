import { reportingCommand, type CommandGroup } from '../command.ts';
import { reportVerdicts } from '../verify/report-verdicts.ts';
import { describeTopics } from '../verify/topics.ts';
import { caseFileSchema, verdictsSchema, verifyCases } from '../verify/verify-cases.ts';

/** Check cases on the command line. */
export const VERIFY_COMMANDS: CommandGroup = {
	verify: reportingCommand(
		'Check cases of your own: id and pass, fail or unsupported, one line a case',
		{ input: caseFileSchema, output: verdictsSchema },
		verifyCases,
		{ report: reportVerdicts, help: describeTopics }
	)
};
