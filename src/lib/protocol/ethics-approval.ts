import { z } from 'zod';

const day = z.iso.date('Write a date, such as 2027-03-11');

/** An approval as its letter states it. */
export const ethicsApprovalSchema = z
	.object({
		protocolHash: z.string().regex(/^[0-9a-f]{64}$/, 'Choose the version that the letter names'),
		board: z.string().trim().min(3, 'Name the board').max(200).default(''),
		reference: z.string().trim().min(1, 'Give the reference of its letter').max(100).default(''),
		approvedOn: day.default(''),
		expiresOn: day.default('')
	})
	.refine(({ approvedOn, expiresOn }) => approvedOn < expiresOn, {
		error: 'The approval ends before it begins',
		path: ['expiresOn']
	});

export type EthicsApprovalInput = z.infer<typeof ethicsApprovalSchema>;
