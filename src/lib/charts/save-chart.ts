const kept = [
	'fill',
	'fill-opacity',
	'fill-rule',
	'stroke',
	'stroke-width',
	'stroke-dasharray',
	'stroke-linecap',
	'stroke-linejoin',
	'stroke-opacity',
	'opacity',
	'font-family',
	'font-size',
	'font-weight',
	'letter-spacing',
	'text-anchor',
	'dominant-baseline',
	'paint-order'
];

/** The picture as a file of its own: every style written into it, as it looks on this screen. */
export function serializeSvg(svg: SVGSVGElement): string {
	const copy = svg.cloneNode(true);
	if (!(copy instanceof SVGSVGElement)) throw new TypeError('a chart must be an SVG element');
	const originals = [svg, ...svg.querySelectorAll('*')];
	const copies = [copy, ...copy.querySelectorAll('*')];
	originals.forEach((original, index) => writeStyles(original, copies[index]));
	const { width, height } = svg.viewBox.baseVal;
	copy.setAttribute('xmlns', 'http://www.w3.org/2000/svg');
	copy.setAttribute('width', String(width));
	copy.setAttribute('height', String(height));
	copy.insertBefore(ground(svg, width, height), copy.firstChild);
	return new XMLSerializer().serializeToString(copy);
}

function writeStyles(original: Element, copy: Element | undefined): void {
	if (!copy) return;
	const style = getComputedStyle(original);
	copy.removeAttribute('class');
	copy.removeAttribute('style');
	for (const name of kept) {
		const value = style.getPropertyValue(name);
		if (value) copy.setAttribute(name, value);
	}
}

function ground(svg: SVGSVGElement, width: number, height: number): SVGRectElement {
	const rect = document.createElementNS('http://www.w3.org/2000/svg', 'rect');
	rect.setAttribute('width', String(width));
	rect.setAttribute('height', String(height));
	rect.setAttribute('fill', getComputedStyle(svg).getPropertyValue('--sheet').trim() || '#fff');
	const style = getComputedStyle(svg.closest('article, section, main') ?? document.body);
	if (style.backgroundColor !== 'rgba(0, 0, 0, 0)')
		rect.setAttribute('fill', style.backgroundColor);
	return rect;
}

/** Offers text as a file. */
export function saveText(fileName: string, type: string, text: string): void {
	const address = URL.createObjectURL(new Blob([text], { type }));
	const link = document.createElement('a');
	link.href = address;
	link.download = fileName;
	link.click();
	setTimeout(() => URL.revokeObjectURL(address), 1000);
}
