/** What superforms says about one field of a form. */
export interface FieldConstraints {
	required?: boolean | undefined;
	min?: number | string | undefined;
	max?: number | string | undefined;
	minlength?: number | undefined;
	maxlength?: number | undefined;
	step?: number | 'any' | undefined;
	pattern?: string | undefined;
}

export type FieldErrors = string[] | undefined;

/** The ids that tie hint and error to the control, in reading order; undefined when there are none. */
export function describedBy(id: string, hint: unknown, errors: FieldErrors): string | undefined {
	const ids = [errors?.length ? `${id}-error` : '', hint ? `${id}-hint` : ''].filter(Boolean);
	return ids.length > 0 ? ids.join(' ') : undefined;
}

/** One look for everything typed into or chosen from. */
export const controlLook =
	'w-full min-h-10.5 rounded-grip border bg-sheet px-3 py-2 text-body text-ink placeholder:text-muted focus-visible:rounded-grip focus-visible:outline-offset-0 disabled:bg-paper disabled:text-muted';

export function controlEdge(errors: FieldErrors): string {
	return errors?.length ? 'border-rose border-[1.5px]' : 'border-edge';
}
