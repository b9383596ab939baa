/**
 * An address within this site to go on to after sign-in, or the first page when `wanted` is none:
 * another site's address, a script, one that browsers would read as another site's, the sign-in
 * pages themselves.
 *
 * @example safePath('/studies/1?day=2') // '/studies/1?day=2'
 * @example safePath('//elsewhere.example') // '/home'
 */
export function safePath(wanted: string | null | undefined, otherwise = '/home'): string {
	if (!wanted || !wanted.startsWith('/') || /[\u0000-\u0020\\\u007f]/.test(wanted))
		return otherwise;
	const base = 'http://here.invalid';
	const url = URL.canParse(wanted, base) ? new URL(wanted, base) : null;
	if (!url || url.origin !== base || url.pathname.startsWith('//')) return otherwise;
	if (url.pathname === '/' || /^\/(signin|signout|auth|demo)(\/|$)/.test(url.pathname)) {
		return otherwise;
	}
	return url.pathname + url.search + url.hash;
}
