import type { LayoutServerLoad } from './$types';
import { loadShell } from '$lib/server/shell/load-shell';

/** What the masthead shows. It guards nothing: every page guards itself. */
export const load: LayoutServerLoad = async ({ locals, params }) => loadShell(locals, params);
