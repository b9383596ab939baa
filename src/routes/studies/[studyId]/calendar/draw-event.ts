import type { GridProps } from './grid-events';

const ovalPath = 'M24.5 9a10.5 5 0 1 1-21 0a10.5 5 0 1 1 21 0z';

/** The inside of one event on the grid: the visit as a piece, set-up and clean-up as lighter ends. */
export function drawEvent(props: GridProps): Node[] {
	if (props.kind === 'visit' || props.kind === 'candidate') return [drawPiece(props)];
	if (props.title === '') return [];
	const label = make('span', 'stretch-label');
	label.append(makeText('span', 'stretch-title', props.title));
	if (props.detail) label.append(makeText('span', 'stretch-detail', props.detail));
	return [label];
}

function drawPiece(props: GridProps): HTMLElement {
	const piece = make('span', 'piece');
	piece.style.insetBlock = `${props.setupShare * 100}% ${props.cleanupShare * 100}%`;
	const line = make('span', 'piece-line');
	if (props.bookingId !== null || props.kind === 'candidate') line.append(drawOval());
	line.append(makeText('span', 'piece-title', props.title));
	piece.append(line);
	if (props.detail) piece.append(' ', makeText('span', 'piece-detail', props.detail));
	return piece;
}

function drawOval(): SVGElement {
	const svg = document.createElementNS('http://www.w3.org/2000/svg', 'svg');
	svg.setAttribute('viewBox', '0 0 28 18');
	svg.setAttribute('aria-hidden', 'true');
	svg.setAttribute('class', 'piece-oval');
	const path = document.createElementNS('http://www.w3.org/2000/svg', 'path');
	path.setAttribute('d', ovalPath);
	path.setAttribute('transform', 'rotate(-20 14 9)');
	svg.append(path);
	return svg;
}

function make(name: string, className: string): HTMLElement {
	const element = document.createElement(name);
	element.className = className;
	return element;
}

function makeText(name: string, className: string, text: string): HTMLElement {
	const element = make(name, className);
	element.textContent = text;
	return element;
}
