import { z } from 'zod';
import {
	computeBetaQuantile,
	computeBetaTails,
	computeBetaUpperQuantile
} from '../../statistics/beta-distribution.ts';
import {
	computeChiSquareCdf,
	computeChiSquareQuantile,
	computeChiSquareSurvival,
	computeChiSquareUpperQuantile
} from '../../statistics/chi-square.ts';
import {
	computeFQuantile,
	computeFTails,
	computeFUpperQuantile
} from '../../statistics/f-distribution.ts';
import {
	computeGammaQuantile,
	computeGammaTails,
	computeGammaUpperQuantile
} from '../../statistics/gamma-distribution.ts';
import type { Tails } from '../../statistics/incomplete-gamma.ts';
import {
	computeNoncentralChiSquareQuantile,
	computeNoncentralChiSquareTails
} from '../../statistics/noncentral-chi-square.ts';
import {
	computeNoncentralFQuantile,
	computeNoncentralFTails
} from '../../statistics/noncentral-f.ts';
import {
	computeNoncentralTQuantile,
	computeNoncentralTTails
} from '../../statistics/noncentral-t.ts';
import {
	computeNormalCdf,
	computeNormalQuantile,
	computeNormalSurvival
} from '../../statistics/normal.ts';
import {
	computeStudentTCdf,
	computeStudentTQuantile,
	computeStudentTSurvival
} from '../../statistics/student-t.ts';
import { endSchema, toEnd } from './finite.ts';

/** Beyond it a distribution is its own limit, and the series behind the noncentral ones do not end. */
const PARAMETER_MAX = 1e12;
const NONCENTRALITY_MAX = 1e6;
const df = z
	.number()
	.positive()
	.max(PARAMETER_MAX)
	.describe('degrees of freedom, any positive number up to 1e12');
const shift = z.number().min(-NONCENTRALITY_MAX).max(NONCENTRALITY_MAX).default(0);
const noncentrality = z.number().min(0).max(NONCENTRALITY_MAX).default(0);
const probabilities = z.array(z.number().min(0).max(1)).default([]);
const asked = {
	at: z.array(z.number()).default([]).describe('points whose tails are wanted'),
	p: probabilities.describe('probabilities at or below the wanted quantiles'),
	upperTail: probabilities.describe('probabilities above the wanted quantiles; keeps tiny ones')
};

export const distributionInputSchema = z.discriminatedUnion('distribution', [
	z.strictObject({ distribution: z.literal('normal'), ...asked }),
	z.strictObject({ distribution: z.literal('t'), df, ncp: shift, ...asked }),
	z.strictObject({
		...{ distribution: z.literal('chi-square'), df, ncp: noncentrality, ...asked }
	}),
	z.strictObject({
		...{ distribution: z.literal('f'), df1: df, df2: df, ncp: noncentrality },
		...asked
	}),
	z.strictObject({
		...{ distribution: z.literal('gamma'), shape: df, rate: z.number().positive().default(1) },
		...asked
	}),
	z.strictObject({ distribution: z.literal('beta'), a: df, b: df, ...asked })
]);

export const distributionSchema = z.strictObject({
	points: z.array(z.strictObject({ x: z.number(), lower: z.number(), upper: z.number() })),
	quantiles: z.array(z.strictObject({ p: z.number(), x: endSchema })),
	upperQuantiles: z.array(z.strictObject({ upperTail: z.number(), x: endSchema }))
});

type Distribution = z.output<typeof distributionInputSchema>;
type Functions = {
	tails: (x: number) => Tails;
	quantile: (p: number) => number;
	upperQuantile: (tail: number) => number;
};

/** Tails and quantiles of one distribution. */
export function describeDistribution(input: Distribution) {
	const { tails, quantile, upperQuantile } = findFunctions(input);
	return {
		points: input.at.map((x) => ({ x, ...tails(x) })),
		quantiles: input.p.map((p) => ({ p, x: toEnd(quantile(p)) })),
		upperQuantiles: input.upperTail.map((tail) => ({
			upperTail: tail,
			x: toEnd(upperQuantile(tail))
		}))
	};
}

function findFunctions(input: Distribution): Functions {
	switch (input.distribution) {
		case 'normal':
			return mirrored(
				(x) => ({ lower: computeNormalCdf(x), upper: computeNormalSurvival(x) }),
				computeNormalQuantile
			);
		case 't':
			return input.ncp === 0 ? studentT(input.df) : noncentralT(input);
		case 'chi-square':
			return input.ncp === 0 ? chiSquare(input.df) : noncentralChiSquare(input);
		case 'f':
			return input.ncp === 0 ? centralF(input) : noncentralF(input);
		case 'gamma':
			return {
				tails: (x) => computeGammaTails(x, input),
				quantile: (p) => computeGammaQuantile(p, input),
				upperQuantile: (tail) => computeGammaUpperQuantile(tail, input)
			};
		case 'beta':
			return {
				tails: (x) => computeBetaTails(x, input),
				quantile: (p) => computeBetaQuantile(p, input),
				upperQuantile: (tail) => computeBetaUpperQuantile(tail, input)
			};
	}
}

/** A distribution that is its own mirror image. */
function mirrored(tails: Functions['tails'], quantile: Functions['quantile']): Functions {
	return { tails, quantile, upperQuantile: (tail) => -quantile(tail) };
}

/** Only lower quantiles: a tiny upper tail keeps the digits that 1 - p has. */
function plain(tails: Functions['tails'], quantile: Functions['quantile']): Functions {
	return { tails, quantile, upperQuantile: (tail) => quantile(1 - tail) };
}

function studentT(own: number): Functions {
	const tails = (x: number) => ({
		lower: computeStudentTCdf(x, own),
		upper: computeStudentTSurvival(x, own)
	});
	return mirrored(tails, (p) => computeStudentTQuantile(p, own));
}

function noncentralT({ df: own, ncp }: { df: number; ncp: number }): Functions {
	return {
		...plain(
			(x) => computeNoncentralTTails(x, { df: own, ncp }),
			(p) => computeNoncentralTQuantile(p, { df: own, ncp })
		),
		upperQuantile: (tail) => -computeNoncentralTQuantile(tail, { df: own, ncp: -ncp })
	};
}

function chiSquare(own: number): Functions {
	return {
		tails: (x) => ({
			lower: computeChiSquareCdf(x, own),
			upper: computeChiSquareSurvival(x, own)
		}),
		quantile: (p) => computeChiSquareQuantile(p, own),
		upperQuantile: (tail) => computeChiSquareUpperQuantile(tail, own)
	};
}

function noncentralChiSquare(shape: { df: number; ncp: number }): Functions {
	return plain(
		(x) => computeNoncentralChiSquareTails(x, shape),
		(p) => computeNoncentralChiSquareQuantile(p, shape)
	);
}

function centralF({ df1, df2 }: { df1: number; df2: number }): Functions {
	return {
		tails: (x) => computeFTails(x, df1, df2),
		quantile: (p) => computeFQuantile(p, df1, df2),
		upperQuantile: (tail) => computeFUpperQuantile(tail, df1, df2)
	};
}

function noncentralF(shape: { df1: number; df2: number; ncp: number }): Functions {
	return plain(
		(x) => computeNoncentralFTails(x, shape),
		(p) => computeNoncentralFQuantile(p, shape)
	);
}
