import { z } from 'zod';
import { norm } from '../../../../linear-algebra/vector.ts';
import { createProjectile, createPuck } from '../../../../tasks/models/first-models.ts';
import {
	computePushReleaseSpeed,
	createPuckFriction,
	createPuckPush
} from '../../../../tasks/models/puck-forms.ts';
import {
	computeRange,
	computeSlowestThrow,
	computeThrowSpeed
} from '../../../../tasks/models/throw-facts.ts';
import { createThrowAzimuth, createThrowHeight } from '../../../../tasks/models/throw-forms.ts';
import { answerEach } from '../../each-of.ts';
import { firstOf, forInputs, listSchema } from '../../topic.ts';

const g = z.number().positive().default(9.81);
const place = { h: z.number(), D: z.number().positive(), H: z.number().default(0), g };
const RAD_PER_DEG = Math.PI / 180;
/** What a record holds besides what its model computes with. */
const rest = { tolerance: 1, resultUnit: 'm', variables: [] };

/** Cases of the drag-free throw. */
export const THROW_TOPIC = firstOf(
	forInputs(z.strictObject({ theta_deg: listSchema, ...place }), ({ theta_deg, ...at }) => {
		const slowest = computeSlowestThrow(at);
		const speeds = answerEach({ theta_deg }, (one) => {
			const solved = computeThrowSpeed(at, one.theta_deg);
			return { v: solved.ok ? solved.speed : null, reachable: solved.ok };
		});
		return { ...speeds, v_min: slowest.speed, theta_at_v_min_deg: slowest.thetaDeg };
	}),
	forInputs(
		z.strictObject({ v: listSchema, theta_deg: listSchema, ...place }),
		({ v, theta_deg, ...at }) => {
			const model = createProjectile({ type: 'projectile', ...at, ...rest });
			const height = createThrowHeight({ type: 'throw-height', ...at, ...rest });
			return answerEach({ v, theta_deg }, (one) => {
				const x = [one.v, one.theta_deg];
				const signed = model.evaluate(x);
				const [bySpeed = 0, perDeg = 0, byHeight = 0] = height.gradient([...x, at.h]);
				const jacobian = [bySpeed, perDeg / RAD_PER_DEG, byHeight];
				return {
					...{ signed, vertical: signed, f: signed, error: signed },
					...{ jacobian, d_f_d_v: bySpeed, d_f_d_theta_per_rad: jacobian[1], d_f_d_h: byHeight }
				};
			});
		}
	),
	forInputs(
		z.strictObject({
			v: listSchema,
			theta_deg: listSchema,
			h: z.number(),
			H: z.number().default(0),
			g
		}),
		({ v, theta_deg, ...at }) =>
			answerEach({ v, theta_deg }, (one) => ({ range: computeRange(at, one.v, one.theta_deg) }))
	),
	forInputs(
		z.strictObject({ v: listSchema, theta_deg: listSchema, phi_deg: listSchema, ...place }),
		({ v, theta_deg, phi_deg, ...at }) => {
			const model = createThrowAzimuth({ type: 'throw-azimuth', side: 0, ...at, ...rest });
			return answerEach({ v, theta_deg, phi_deg }, (one) => {
				const x = [one.v, one.theta_deg, one.phi_deg];
				const results = model.results(x);
				const perRad = model
					.jacobian(x)
					.map(([a = 0, b = 0, c = 0]) => [a, b / RAD_PER_DEG, c / RAD_PER_DEG]);
				const [lateral, vertical] = results;
				return { lateral, vertical, distance: norm(results), jacobian: perRad };
			});
		}
	)
);

/** Cases of the sliding puck. */
export const PUCK_TOPIC = firstOf(
	forInputs(
		z.strictObject({
			...{ F: listSchema, s: listSchema, m: z.number(), mu: z.number(), g },
			D: z.number().optional()
		}),
		({ F, s, m, mu, g, D }) => {
			const model = createPuckPush({ type: 'puck-push', m, mu, g, D: D ?? 0, ...rest });
			return answerEach({ F, s }, (one) => {
				const signed = model.evaluate([one.F, one.s]);
				return {
					...{
						signed,
						total_distance: signed + (D ?? 0),
						jacobian_F_s: model.gradient([one.F, one.s])
					},
					release_speed: computePushReleaseSpeed({ m, mu, g }, one.F, one.s)
				};
			});
		}
	),
	forInputs(
		z.strictObject({
			...{ v: listSchema, x0: listSchema.default([0]), mu: listSchema, g, D: z.number().optional() }
		}),
		({ v, x0, mu, g, D }) =>
			answerEach({ v, x0, mu }, (one) => {
				const release = createPuck({ type: 'puck', mu: one.mu, g, D: D ?? 0, ...rest });
				const friction = createPuckFriction({
					...{ type: 'puck-friction', x0: one.x0, g, D: D ?? 0, ...rest }
				});
				const signed = release.evaluate([one.v, one.x0]);
				const [by_v, by_mu] = friction.gradient([one.v, one.mu]);
				return {
					...{ signed, f: signed, distance: signed + (D ?? 0) },
					...{ jacobian: release.gradient([one.v, one.x0]), jacobian_v_x0: [by_v, 1] },
					jacobian_v_mu: [by_v, by_mu]
				};
			})
	),
	forInputs(
		z.strictObject({ x0: listSchema, mu: listSchema, g, D: z.number() }),
		({ x0, mu, g, D }) =>
			answerEach({ x0, mu }, (one) => ({
				v: D > one.x0 ? Math.sqrt(2 * one.mu * g * (D - one.x0)) : null
			}))
	)
);
