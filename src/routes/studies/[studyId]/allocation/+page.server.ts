import { setError, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { listBlockSizes, sealInputSchema, suggestBlockSizes } from '$lib/allocation/seal-input';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadAllocation } from '$lib/server/allocation/load-allocation';
import { sealVersion } from '$lib/server/allocation/seal-version';
import { config } from '$lib/server/config';
import { loadProgress } from '$lib/server/studies/load-progress';
import { loadStudyZone } from '$lib/server/studies/load-study-zone';
import { formatWithZone } from '$lib/time/format-instant';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'allocation:read', params);
	const { db, clock } = locals;
	const versions = await loadAllocation(db, grant);
	const zone = await loadStudyZone(db, grant.studyId);
	const [newest] = versions;
	const armCount = newest?.arms.length ?? 0;
	const start = { protocolHash: newest?.hash ?? '', blockSizes: suggestBlockSizes(armCount) };
	return {
		versions: versions.map((version) => ({
			...version,
			seal: version.seal && {
				...version.seal,
				sealedAt: formatWithZone(version.seal.sealedAtMs, zone)
			}
		})),
		progress: await loadProgress(db, clock, grant),
		form:
			newest && !newest.seal
				? await superValidate(start, zod4(sealInputSchema), { errors: false })
				: null,
		possibleSizes: listBlockSizes(armCount)
	};
};

export const actions: Actions = {
	default: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'allocation:seal', params);
		const form = await superValidate(request, zod4(sealInputSchema));
		if (!form.valid) return { form };
		const services = { clock: locals.clock, settings: config() };
		const sealed = await sealVersion(locals.db, services, grant, form.data);
		if (sealed.ok) return { form };
		const words = {
			'unknown-version': 'This study has no version with that hash any more.',
			'already-sealed': 'This version is sealed already.',
			'sizes-do-not-fit': 'Each size must be a multiple of the number of arms.'
		};
		return setError(form, 'blockSizes._errors', words[sealed.reason]);
	}
};
