import { z } from 'zod';
import { computeChiSquareCdf } from '../../../../statistics/chi-square.ts';
import { computeCloudOverlap } from '../../../../variability/cloud-overlap.ts';
import {
	computeCovarianceDistance,
	computeLogEuclideanDistance,
	computeLogVolumeRatio
} from '../../../../variability/covariance-distance.ts';
import { computeEllipseIntersection } from '../../../../variability/ellipse-intersection.ts';
import { computeSeparation } from '../../../../variability/ellipsoid-separation.ts';
import { computeMassInside } from '../../../../variability/mass-inside.ts';
import { firstOf, forInputs, listSchema, type TopicGroup } from '../../topic.ts';
import { matrix, numbers, requireOk } from './case-inputs.ts';

const ellipsoids = z.strictObject({ c1: numbers, A1: matrix, c2: numbers, A2: matrix });

/** Ellipsoids whose least K lies this near 0 touch. */
const TOUCHING_K = 1e-8;

/** Two clouds or ellipsoids against each other. */
export const CLOUD_TOPICS: TopicGroup = {
	'cov-distance': forInputs(z.strictObject({ A: matrix, B: matrix }), ({ A, B }) => ({
		affine_invariant: computeCovarianceDistance(A, B),
		log_euclidean: computeLogEuclideanDistance(A, B),
		log_volume_ratio: computeLogVolumeRatio(A, B)
	})),
	overlap: firstOf(
		forInputs(
			z.strictObject({ m1: numbers, S1: matrix, m2: numbers, S2: matrix }),
			compareNormalClouds
		),
		forInputs(ellipsoids, compareAreas)
	),
	separation: forInputs(ellipsoids, ({ c1, A1, c2, A2 }) => {
		const { kMin, touchingScale } = computeSeparation(
			{ center: c1, shape: A1 },
			{ center: c2, shape: A2 }
		);
		const separated = Math.abs(kMin) < TOUCHING_K ? 'boundary' : kMin < 0;
		return { K_min: kMin, separated, touching_scale: touchingScale };
	}),
	mass: firstOf(
		forInputs(
			z.strictObject({ mean: numbers, cov: matrix, center: numbers, shape: matrix }),
			({ cov: covariance, ...rest }) => ({
				probability: requireOk(computeMassInside({ covariance, ...rest })).probability
			})
		),
		forInputs(z.strictObject({ d: z.number(), k2: listSchema }), ({ d, k2 }) => ({
			probability: k2.map((square) => computeChiSquareCdf(square, d))
		}))
	)
};

function compareNormalClouds(inputs: {
	m1: number[];
	S1: number[][];
	m2: number[];
	S2: number[][];
}) {
	const overlap = requireOk(
		computeCloudOverlap(
			{ mean: inputs.m1, covariance: inputs.S1 },
			{ mean: inputs.m2, covariance: inputs.S2 }
		)
	);
	const { divergenceFromFirst, divergenceFromSecond, wasserstein } = overlap;
	return {
		distance: overlap.bhattacharyyaDistance,
		coefficient: overlap.bhattacharyyaCoefficient,
		hellinger: overlap.hellinger,
		...{ kl: divergenceFromFirst, kl_12: divergenceFromFirst, kl_21: divergenceFromSecond },
		...{ wasserstein, wasserstein2: wasserstein, wasserstein_2: wasserstein }
	};
}

function compareAreas({ c1, A1, c2, A2 }: z.output<typeof ellipsoids>) {
	const found = requireOk(
		computeEllipseIntersection({ center: c1, shape: A1 }, { center: c2, shape: A2 })
	);
	return {
		area1: found.firstArea,
		area2: found.secondArea,
		intersection: found.area,
		share_of_1: found.shareOfFirst,
		share_of_2: found.shareOfSecond,
		jaccard: found.jaccard
	};
}
