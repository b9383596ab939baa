import { command, type CommandGroup } from '../command.ts';
import { cloudInputSchema, cloudSchema, describeCloud } from '../describe-cloud.ts';
import { compareBlocks, overlapInputSchema, overlapSchema } from '../variability/compare-blocks.ts';
import {
	describeAlignment,
	describeGoal,
	describeManifold,
	structureInputSchema
} from '../variability/describe-structure.ts';
import {
	decomposeInputSchema,
	decompositionSchema,
	explainImprovement
} from '../variability/explain-improvement.ts';
import { computeMass, massInputSchema, massSchema } from '../variability/mass-in-region.ts';
import {
	alignmentSchema,
	goalSchema,
	manifoldVarianceSchema
} from '../variability/structure-schemas.ts';

/** Clouds of trials on the command line. */
export const VARIABILITY_COMMANDS: CommandGroup = {
	cloud: command(
		'Mean, covariance and the four ellipsoids of trials',
		{ input: cloudInputSchema, output: cloudSchema },
		describeCloud
	),
	overlap: command(
		'How far two blocks of trials lie apart',
		{ input: overlapInputSchema, output: overlapSchema },
		compareBlocks
	),
	mass: command(
		'Probability of a normal cloud inside an ellipsoid',
		{ input: massInputSchema, output: massSchema },
		computeMass
	),
	decompose: command(
		'Place, spread and covariation in the improvement between two blocks',
		{ input: decomposeInputSchema, output: decompositionSchema },
		explainImprovement
	),
	ucm: command(
		'Variance along and across the solutions',
		{ input: structureInputSchema, output: manifoldVarianceSchema },
		describeManifold
	),
	alignment: command(
		'Angle of a cloud to the solutions',
		{ input: structureInputSchema, output: alignmentSchema },
		describeAlignment
	),
	gem: command(
		'How spread of executions becomes spread of the result',
		{ input: structureInputSchema, output: goalSchema },
		describeGoal
	)
};
