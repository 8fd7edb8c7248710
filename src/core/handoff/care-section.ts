import { type Care, type CareTopic, type FallZone, sayCare } from "../flight/index.ts";
import { find, type Show } from "../show/index.ts";
import { groundPlan } from "./ground-plan.ts";
import { type Html, html, list, table } from "./html.ts";

/** What a flight director reads first: every matter that someone has to do something about. */
export function attentionOf(show: Show, care: Care): string[] {
	return sayCare(show, care)
		.filter(({ attention }) => attention)
		.map(({ heading, sentences }) => `${heading}: ${sentences.join(" ")}`);
}

/** The show as a whole: sentences first, then figures, then what they rest on. */
export function careSection(show: Show, care: Care, ground: ArrayLike<number> | null): Html {
	const topics = sayCare(show, care).map(
		(topic) =>
			html`<section class="topic"><h3>${topic.heading}${topic.attention ? html` <span class="mark">needs attention</span>` : null}</h3>
<p>${topic.sentences.join(" ")}</p>
${figuresOf(topic, show, care)}<p class="rests">${topic.assumptions.join(" ")}</p></section>
`,
	);
	return html`<p>Estimates beside the proof: what may happen when a drone fails, and how drones fly that are not exactly on their paths. They change no verdict, and none of them is a bound or a permission.</p>
${groundPlan(show, care.fallZone, ground)}${topics}`;
}

function figuresOf(topic: CareTopic, show: Show, care: Care): Html | null {
	if (topic.id === "impact" && care.fallZone !== null) return energyScale(care.fallZone);
	if (topic.id === "wake") return remedies(care);
	if (topic.id === "as-flown" && care.asFlown.legs.length > 0) return flownTable(show, care);
	return null;
}

/** Impact energy on a bar with the marks of the rules. */
function energyScale({ impact }: FallZone): Html {
	const most = 1.15 * Math.max(impact.energy, ...impact.marks.map(({ energy }) => energy));
	const at = (energy: number): string => ((200 * energy) / most).toFixed(1);
	const marks = impact.marks.map(
		({ energy }, k) =>
			html`<line x1="${at(energy)}" x2="${at(energy)}" y1="4" y2="${28 - 8 * k}"/><text x="${Number(at(energy)) + 2}" y="${28.5 - 8 * k}">${k === 0 ? "107.120" : "107.130"}: ${energy.toFixed(1)} J</text>`,
	);
	return html`<svg class="energy" viewBox="0 0 215 32" role="img" aria-label="Impact energy against two marks"><rect x="0" y="7" width="${at(impact.energy)}" height="8"/>${marks}<text x="${at(impact.energy)}" y="5" text-anchor="end">${impact.energy.toFixed(0)} J</text></svg>
`;
}

function remedies(care: Care): Html | null {
	if (care.wakeRemedies.length === 0) return null;
	return list(
		care.wakeRemedies.map(
			({ change, cost, gap }) =>
				html`${change} ${cost} Smallest distance then ${Number.isFinite(gap) ? `${gap.toFixed(2)} m` : "that of one drone"}.`,
		),
	);
}

function flownTable(show: Show, care: Care): Html {
	const rows = care.asFlown.legs.map((leg) => {
		const gap = leg.gap === null ? "over twice the spacing" : leg.gap.distance.toFixed(2);
		const drones = leg.gap === null ? "" : `${leg.gap.drones[0] + 1} and ${leg.gap.drones[1] + 1}`;
		return [
			html`<b>${find(show.cues, leg.id)?.number ?? leg.id}</b>`,
			leg.lag.distance.toFixed(2),
			leg.atArrival.toFixed(2),
			leg.settled.toFixed(1),
			gap,
			drones,
			leg.gapInGust === null ? "" : leg.gapInGust.toFixed(2),
		];
	});
	const head = [
		"Cue",
		"Farthest behind m",
		"From slot at arrival m",
		"In slots after s",
		"Gap as flown m",
		"Drones",
		"In a gust m",
	];
	return table(head, rows);
}
