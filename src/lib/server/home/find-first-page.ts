/** Where the front page sends somebody who is signed in; null for everybody else. */
export function findFirstPage(locals: App.Locals): string | null {
	return locals.person ? '/home' : null;
}
