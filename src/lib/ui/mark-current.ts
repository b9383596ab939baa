export interface MarkedSection {
	href: string;
	label: string;
	current: boolean;
}

/** Marks the section one is in: the one whose address is the longest beginning of the page's own. */
export function markCurrent(
	sections: readonly { href: string; label: string }[],
	pathname: string
): MarkedSection[] {
	const fits = (href: string) => pathname === href || pathname.startsWith(`${href}/`);
	const longest = Math.max(0, ...sections.map(({ href }) => (fits(href) ? href.length : 0)));
	return sections.map(({ href, label }) => ({
		href,
		label,
		current: longest > 0 && fits(href) && href.length === longest
	}));
}
