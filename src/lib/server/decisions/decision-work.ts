import { z } from 'zod';
import { allocateParticipant } from '$lib/server/allocation/allocate-participant';
import { issueDueBundles } from '$lib/server/bundles/issue-due-bundles';
import { enqueueInvitations } from '$lib/server/invitations/enqueue-invitations';
import { mailSettingOf } from '$lib/server/invitations/mail-setting';
import type { WorkContext } from '$lib/server/jobs/start-work';
import { loadSigningKey } from '$lib/server/keys/signing-key';
import { runtimeKeys } from '$lib/server/runtime';
import { applyDueFallbacks } from './apply-due-fallbacks';
import { decideDue } from './decide-due';
import { decideForPerson, type DecideServices } from './decide-for-person';

const jobSchema = z.object({ participantId: z.uuid() });

/** A job after new trials: decides what follows for one participant. */
export async function workDecide(
	context: WorkContext,
	data: Record<string, unknown>
): Promise<void> {
	const { participantId } = jobSchema.parse(data);
	await decideForPerson(context.db, servicesOf(context), participantId);
}

/** By the clock: decisions due, fallbacks for what nobody settled, then the files of ready blocks. */
export async function workDueDecisions(context: WorkContext): Promise<void> {
	const { db, clock, settings } = context;
	await decideDue(db, servicesOf(context));
	await applyDueFallbacks(db, clock);
	const { OVALRY_KEYS: folder, OVALRY_WRAPPING_KEY: wrappingKey } = settings;
	await issueDueBundles(db, { clock, signingKey: () => loadSigningKey({ folder, wrappingKey }) });
}

function servicesOf({ clock, settings }: WorkContext): DecideServices {
	return {
		clock,
		allocate: async (tx, participantId) => {
			const allocated = await allocateParticipant(tx, { clock, settings }, participantId);
			// The visits after baseline are told of once there is an allocation, in every arm alike.
			const mail = mailSettingOf(settings, runtimeKeys());
			if (allocated) await enqueueInvitations(tx, clock, mail, participantId);
			return allocated;
		}
	};
}
