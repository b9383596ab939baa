import { z } from 'zod';
import { roleOrder, type RoleName } from './role-names';

export const roleField = z.enum(roleOrder as [RoleName, ...RoleName[]]);

export const giveRoleSchema = z.object({
	personId: z.uuid('Choose a member.'),
	// Nothing chosen stays nothing: a field of known roles alone would be filled with the first.
	role: z
		.string()
		.default('')
		.refine((text) => roleField.safeParse(text).success, 'Choose a role.')
});

/** Names one role that was given in a form with a single button. */
export const roleRowSchema = z.object({ roleId: z.uuid() });
