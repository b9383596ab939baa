import type { PowerPoint } from './power-curve.ts';
import {
	computePowerWithLosses,
	computeTwoSampleTPower,
	type Losses,
	type TwoSampleDesign
} from './two-sample-t.ts';

export type PowerScriptOptions = {
	/** Named in the head of the script, one line. */
	title: string;
	/** Identifies what the numbers belong to, for instance a protocol's hash; one line. */
	reference: string;
	design: TwoSampleDesign;
	losses: Losses;
	/** Points to recompute; may be empty. */
	curve: readonly PowerPoint[];
};

/**
 * An R script (base R, no packages) that recomputes the closed-form power and stops when a value
 * differs from the one given by more than 1e-6.
 *
 * Shapes: design, losses and curve in, text with line feeds out.
 * Method: the same formula through R's own qt and pt; where groups are equal, two-sided power is
 * also compared with power.t.test(strict = TRUE).
 * Source: R stats package. Accuracy: numbers are written with 12 significant digits.
 * @throws RangeError as `computeTwoSampleTPower` does
 * @example writePowerScript({ title: 'Version 5', reference, design, losses, curve: [] })
 */
export function writePowerScript(options: PowerScriptOptions): string {
	const { title, reference, design, losses, curve } = options;
	return [
		`# ${oneLine(title)}`,
		`# ${oneLine(reference)}`,
		'# Power of the two-sample t test, equal variances. Base R only.',
		'',
		...FUNCTIONS,
		'',
		...listAssumptions(design, losses),
		'',
		...listChecks(design, losses),
		...(curve.length === 0 ? [] : ['', ...listCurve(curve)]),
		''
	].join('\n');
}

const FUNCTIONS = [
	'power_t <- function(d, n1, n2, alpha, sides) {',
	'  df <- n1 + n2 - 2',
	'  ncp <- d * sqrt(n1 * n2 / (n1 + n2))',
	'  critical <- qt(alpha / sides, df, lower.tail = FALSE)',
	'  above <- pt(critical, df, ncp, lower.tail = FALSE)',
	'  below <- if (sides == 2) pt(-critical, df, ncp) else 0',
	'  above + below',
	'}',
	'',
	'same <- function(what, computed, expected) {',
	'  if (!isTRUE(all(abs(computed - expected) < 1e-6))) {',
	'    stop(what, ": ", format(computed, digits = 9), " instead of ", format(expected, digits = 9))',
	'  }',
	'  cat(sprintf("%-40s %.4f\\n", what, computed), sep = "")',
	'}'
];

function listAssumptions(design: TwoSampleDesign, losses: Losses): string[] {
	return [
		`d <- ${write(design.effectSize)}            # effect in standard deviations`,
		`n1 <- ${write(design.n1)}           # people in group 1`,
		`n2 <- ${write(design.n2)}           # people in group 2`,
		`alpha <- ${write(design.alpha)}`,
		`sides <- ${design.sides}`,
		`people_lost <- ${write(losses.peopleLossShare)}`,
		`effect_lost <- ${write(losses.effectLossShare)}`,
		'stay <- 1 - people_lost'
	].map((line) => line.replace(/ +#/, '  #'));
}

function listChecks(design: TwoSampleDesign, losses: Losses): string[] {
	const people = { ...losses, effectLossShare: 0 };
	const effect = { ...losses, peopleLossShare: 0 };
	const check = (what: string, call: string, value: number) =>
		`same("${what}", power_t(${call}, alpha, sides), ${write(value)})`;
	const lines = [
		check('as planned', 'd, n1, n2', computeTwoSampleTPower(design)),
		check('people lost', 'd, n1 * stay, n2 * stay', computePowerWithLosses(design, people)),
		check('effect lost', 'd * (1 - effect_lost), n1, n2', computePowerWithLosses(design, effect)),
		check(
			'both',
			'd * (1 - effect_lost), n1 * stay, n2 * stay',
			computePowerWithLosses(design, losses)
		)
	];
	if (design.n1 !== design.n2) return lines;
	const type = design.sides === 2 ? '"two.sided"' : '"one.sided"';
	const strict = design.sides === 2 ? ', strict = TRUE' : '';
	const call = `power.t.test(n = n1, delta = d, sd = 1, sig.level = alpha, alternative = ${type}${strict})`;
	const value = write(computeTwoSampleTPower(design));
	return [...lines, `same("as planned, by power.t.test", ${call}$power, ${value})`];
}

function listCurve(curve: readonly PowerPoint[]): string[] {
	const vector = (values: readonly number[]) => `c(${values.map(write).join(', ')})`;
	const ratio = 'n2 / n1';
	const left = curve.flatMap(({ n, powerWithLosses }) =>
		powerWithLosses === null ? [] : [{ n, powerWithLosses }]
	);
	return [
		`n <- ${vector(curve.map(({ n }) => n))}`,
		`planned <- ${vector(curve.map(({ power }) => power))}`,
		`for (i in seq_along(n)) same(paste("planned, n", n[i]), power_t(d, n[i], n[i] * ${ratio}, alpha, sides), planned[i])`,
		...(left.length === 0
			? []
			: [
					`n <- ${vector(left.map(({ n }) => n))}`,
					`both <- ${vector(left.map(({ powerWithLosses }) => powerWithLosses))}`,
					`for (i in seq_along(n)) same(paste("both losses, n", n[i]), power_t(d * (1 - effect_lost), n[i] * stay, n[i] * ${ratio} * stay, alpha, sides), both[i])`
				])
	];
}

/** Twelve significant digits, as R reads them. */
function write(value: number): string {
	return String(Number(value.toPrecision(12)));
}

/** Nothing that could end the comment and begin code. */
function oneLine(text: string): string {
	return text.replace(/[\p{Cc}\u2028\u2029]+/gu, ' ').trim();
}
