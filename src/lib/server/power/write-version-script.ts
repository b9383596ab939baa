import { computePowerPicture, designOf, lossesOf } from '$lib/power/power-report';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { writePowerScript } from '$scheduler/power/r-script';
import { loadPower } from './load-power';

export type VersionScript = { fileName: string; text: string };

/** The R script that recomputes the power of a version. Null: no such version, or nothing compared. */
export async function writeVersionScript(
	db: Queryable,
	grant: Grant<'power:read'>,
	{ number }: { number?: number | undefined }
): Promise<VersionScript | null> {
	const loaded = await loadPower(db, grant, { number });
	const comparison = loaded?.version.comparison;
	if (!loaded || !comparison) return null;
	const { version } = loaded;
	const { points, tableAt } = computePowerPicture(comparison);
	const text = writePowerScript({
		title: `Protocol version ${version.number}: ${comparison.outcome}`,
		reference: `SHA-256 ${version.hash}`,
		design: designOf(comparison),
		losses: lossesOf(comparison),
		curve: points.filter(({ n }) => tableAt.includes(n))
	});
	return { fileName: `power-version-${version.number}.R`, text };
}
