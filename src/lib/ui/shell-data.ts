/** What every page knows about where it stands; made by the root layout on the server. */
export interface ShellData {
	person: { name: string; email: string } | null;
	lab: { id: string; name: string; zone: string } | null;
	study: ShellStudy | null;
	sections: ShellSection[];
	/** Both already written out in the lab's zone. */
	nowText: string;
	zoneText: string;
	demo: ShellDemo | null;
}

export interface ShellStudy {
	id: string;
	workingTitle: string;
	/** In words: "draft, not started", "running". */
	state: string;
	versionNumber: number | null;
}

export interface ShellSection {
	href: string;
	label: string;
}

export interface ShellDemo {
	personName: string;
	role: string;
	nowText: string;
}
