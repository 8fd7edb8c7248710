import {
	type Care,
	LANDING_SPEED,
	LAST_METRES,
	LAST_METRES_SPEED,
	type ShowCheck,
	type ShowFlight,
	type TransitionCheck,
} from "../flight/index.ts";
import { find, type Show } from "../show/index.ts";
import { GAP_TOLERANCE, LIMIT_TOLERANCE, TIGHT_SHARE } from "../units/index.ts";
import { attentionOf, careSection } from "./care-section.ts";
import { CAUTIONS } from "./cautions.ts";
import type { CueLine } from "./cue-list.ts";
import { escapeHtml, type Html, html, list, table } from "./html.ts";
import { pageStyle, REPORT_STYLE } from "./report-style.ts";
import { runSheet, STANDBY_SECONDS } from "./run-sheet.ts";
import { framesASecond, type Timecode } from "./timecode.ts";

export interface ReportInput {
	readonly show: Show;
	readonly check: ShowCheck;
	readonly care: Care;
	/** Null where there is nothing to fly. */
	readonly flight: ShowFlight | null;
	readonly lines: readonly CueLine[];
	/** Seconds: end of the show's music. */
	readonly end: number;
	readonly revision: string;
	/** True where the flight paths stay behind. */
	readonly draft: boolean;
	readonly timecode: Timecode;
	/** Sentences about flashes; empty where none was found. */
	readonly flashes: readonly string[];
	/** Sentences about what was done on the way out: a raised rate, music that could not be heard. */
	readonly notes: readonly string[];
	/** Rows a second of the flight paths that leave with this report; null where none leave. */
	readonly rates: { readonly positions: number; readonly light: number } | null;
}

function number(value: number | null, digits: number): string {
	return value === null ? "none" : value.toFixed(digits);
}

function formationName(show: Show, id: string): string {
	const formation = find(show.formations, id);
	return formation === undefined || formation.name === "" ? id : formation.name;
}

function legRow(show: Show, leg: TransitionCheck): readonly (string | Html)[] {
	const cue = find(show.cues, leg.id);
	const drones = leg.gap === null ? "" : ` (${leg.gap.drones[0] + 1} and ${leg.gap.drones[1] + 1})`;
	const flies = leg.verdicts.includes("flies");
	return [
		html`<b>${cue === undefined ? leg.id : cue.number}</b>`,
		`${formationName(show, leg.from)} to ${formationName(show, leg.to)}`,
		html`<span class="${flies ? "flies" : "broken"}">${leg.verdicts.join(", ")}</span>`,
		number(leg.available, 2),
		number(leg.needed, 2),
		leg.slackBeats === null ? number(leg.slack, 2) : `${number(leg.slack, 2)} (${number(leg.slackBeats, 1)} beats)`,
		leg.gap === null ? "one drone" : `${leg.gap.distance.toFixed(3)}${drones}`,
		`${leg.peak.horizontal.toFixed(2)} / ${leg.peak.climb.toFixed(2)} / ${leg.peak.descent.toFixed(2)}`,
		`${leg.peak.acceleration.toFixed(2)} / ${leg.peak.jerk.toFixed(2)}`,
	];
}

function flightSection(show: Show, check: ShowCheck): Html {
	const legs = [check.launch, ...check.transitions, check.landing].filter((leg) => leg !== null);
	const head = [
		"Cue",
		"From, to",
		"Verdict",
		"Available s",
		"Needed s",
		"Slack s",
		"Gap m (drones)",
		"Peak horizontal / climb / descent m/s",
		"Peak acceleration m/s² / jerk m/s³",
	];
	const rows = table(
		head,
		legs.map((leg) => legRow(show, leg)),
	);
	const proofs = new Map<string, string[]>();
	for (const leg of legs) {
		const name = find(show.cues, leg.id)?.number ?? leg.id;
		const by = [...new Set(leg.certificate.separation.split("; "))].join("; ");
		proofs.set(by, [...(proofs.get(by) ?? []), name]);
	}
	const proven = [...proofs].map(([by, names]) => `Separation of ${names.join(", ")}: ${by}.`);
	return html`<div class="flight">${rows}</div><p class="rests">${proven.join(" ")}</p>`;
}

function remedySection(show: Show, check: ShowCheck): Html | null {
	const legs = [check.launch, ...check.transitions, check.landing].filter((leg) => leg !== null);
	const broken = legs.filter((leg) => !leg.verdicts.includes("flies") && leg.remedies.length > 0);
	if (broken.length === 0) return null;
	const items = broken.map((leg) => {
		const name = find(show.cues, leg.id)?.number ?? leg.id;
		return html`<b>${name}</b>: ${leg.remedies.map((remedy) => `${remedy.change} ${remedy.cost} `)}`;
	});
	return html`<h3>What would make it fly</h3>${list(items)}`;
}

function limitsSection(show: Show): Html {
	const { limits } = show.fleet;
	return table(
		["Limit", "Value"],
		[
			["Horizontal speed", `${limits.horizontal} m/s`],
			["Climb", `${limits.climb} m/s`],
			["Descent", `${limits.descent} m/s`],
			["Acceleration, magnitude of the vector", `${limits.acceleration} m/s²`],
			["Jerk, magnitude of the vector", `${limits.jerk} m/s³`],
			["Spacing, horizontally", `${limits.spacing} m`],
			["Spacing, vertically (spacing × downwash)", `${limits.spacing * limits.downwash} m`],
			["Endurance from motor start", `${limits.endurance} s, ${Math.round(100 * limits.reserve)} % of it in reserve`],
			["Position error of the fleet", `${show.fleet.positionError} m`],
			["Mass of a drone", `${show.fleet.mass} kg`],
			["Wind of the venue, and gust on top of it", `${show.venue.wind} m/s, ${show.venue.gust} m/s`],
			["Flight volume", volumeText(show)],
			["Buffer around it", `${show.venue.buffer} m`],
		],
	);
}

/** "−90 to 90 m right, 0 to 100 m away, 0 to 120 m up". */
function volumeText({ venue: { volume } }: Show): string {
	const axes = ["right", "away", "up"];
	return axes.map((axis, k) => `${volume.min[k]} to ${volume.max[k]} m ${axis}`.replaceAll("-", "−")).join(", ");
}

function assumptions(input: ReportInput): string[] {
	const { timecode, rates } = input;
	const said = [
		"Positions are metres in the show frame: x to the audience's right, y away from the audience, z up, origin on the ground at the centre of the audience-side edge.",
		"Seconds count from the soundtrack's first sample.",
		`Timecode counts ${timecode.rate} frames a second${timecode.rate === "29.97" ? ", drop-frame," : ""} and reads ${timecode.start} at the soundtrack's first sample; a cue has the label of the nearest frame, at most ${(500 / framesASecond(timecode.rate)).toFixed(0)} ms away.`,
		`Slots are rounded to whole millimetres, so a gap may stand ${1000 * GAP_TOLERANCE} mm under the spacing and no more; a peak may pass its limit by the share ${LIMIT_TOLERANCE} and no more.`,
		`A verdict is tight when less than ${100 * TIGHT_SHARE} % of the time or of the spacing is in hand.`,
		"Below 1 m only the take-off grid's own pitch counts as spacing.",
		`Over the take-off grid drones come down at no more than ${LANDING_SPEED} m/s, the last ${LAST_METRES} m at no more than ${LAST_METRES_SPEED} m/s, each onto its own place.`,
		"The proof takes every drone to be exactly on its path; it knows no wind, no lag and no failing motor.",
		`A called cue has its standby ${STANDBY_SECONDS} s before it.`,
	];
	if (rates !== null) {
		said.push(
			`Flight paths hold ${rates.positions} positions and ${rates.light} colours a second; between rows a drone flies straight and light is linear, and it is this interpolated file that was proven.`,
		);
	}
	return said;
}

/** How the legs came out, in one sentence. */
function summary(check: ShowCheck): string {
	const legs = [check.launch, ...check.transitions, check.landing].filter((leg) => leg !== null);
	const broken = legs.filter((leg) => !leg.verdicts.includes("flies")).length;
	const tight = legs.filter((leg) => leg.verdicts.includes("tight")).length;
	const said = broken === 0 ? "every one flies" : `${broken} of them can't be flown`;
	const close = tight === 0 ? "none is tight" : `${tight} ${tight === 1 ? "is" : "are"} tight`;
	return `Launch, landing and ${check.transitions.length} transitions were proven one by one: ${said}, ${close}.`;
}

/** Empty lines for the people who decide. */
function decision(): Html {
	const rows = [
		"Wind aloft, gusts, rain, icing",
		"Field clear out to the fall zone and its surroundings",
		"Go or no-go, name, time",
	];
	return html`<table class="decision"><tbody>${rows.map((row) => html`<tr><td>${row}</td><td></td></tr>`)}</tbody></table>\n`;
}

/** `report.html`: one page without anything outside itself, for the screen and for paper; the run sheet is in it. */
export function writeReport(input: ReportInput): string {
	const { show, check, revision } = input;
	const title = show.title === "" ? "Untitled show" : show.title;
	const heading = (name: string, sheet = false): Html =>
		html`<h2${sheet ? html` class="sheet"` : null}>${name} <small>revision ${revision}</small></h2>\n`;
	const { airborne, limit } = check.endurance;
	const enduranceHeld = airborne <= limit;
	const formations = check.formations.map(({ id, gap, verdicts }) => [
		formationName(show, id),
		Number.isFinite(gap) ? gap.toFixed(3) : "one drone",
		verdicts.join(", "),
	]);
	const soundtrack =
		show.soundtrack === null
			? "no soundtrack"
			: `${show.soundtrack.file}, ${show.soundtrack.duration.toFixed(2)} s, SHA-256 ${show.soundtrack.sha256}`;
	const attention = [...attentionOf(show, input.care), ...input.flashes.map((flash) => `Flashes: ${flash}`)];
	const body = html`<h1>${title}</h1>
<p class="facts">Revision <b>${revision}</b> · ${show.fleet.count} drones${show.fleet.spares > 0 ? ` and ${show.fleet.spares} spare` : null} · ${soundtrack}</p>
${input.draft ? html`<p class="draft">DRAFT: this hand-off holds no flight paths. Not for flight.</p>\n` : null}<p class="answer">${check.flies ? "The show flies, as planned and within the limits below." : "The show can't be flown as it stands."}</p>
<p>${summary(check)} This report advises; whether to fly is decided on the night by the flight director.</p>
<div class="cautions">${heading("Cautions")}${list(CAUTIONS)}</div>
${heading("Needs attention")}${attention.length === 0 ? html`<p>Nothing beside the cautions was found that someone has to see to first.</p>\n` : list(attention)}
${heading("The show as a whole")}${careSection(show, input.care, input.flight?.ground ?? null)}<div class="after"></div>
${heading("Flight", true)}${flightSection(show, check)}${remedySection(show, check)}
${heading("Formations")}<div class="narrow">${table(["Formation", "Smallest distance m", "Verdict"], formations)}</div>
${heading("Endurance")}<p>From the first motor start to the last landing ${airborne.toFixed(1)} s, against ${limit.toFixed(1)} s (endurance less reserve): ${enduranceHeld ? "held" : html`<b>not held</b>`}.</p>
${heading("Flashes")}${
	input.flashes.length === 0
		? html`<p>No more than three general or red flashes in any one second were found (WCAG 2.3.1).</p>\n`
		: list(input.flashes)
}
${heading("Notes")}${list([...check.notes, ...input.notes])}
${heading("Limits")}<div class="narrow">${limitsSection(show)}</div>
${heading("Assumptions and tolerances")}${list(assumptions(input))}
${heading("Decision")}<p>To be filled in by hand on the night; nothing in these files does it for anyone.</p>
${decision()}
${heading("Run sheet", true)}${runSheet(input.lines, input.flight, input.end, input.timecode)}`;
	return `<!doctype html>
<html lang="en-GB">
<head>
<meta charset="utf-8">
<meta http-equiv="Content-Security-Policy" content="default-src 'none'; style-src 'unsafe-inline'">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>${escapeHtml(`${title} · ${revision}`)}</title>
<style>${REPORT_STYLE}${pageStyle(title, revision)}</style>
</head>
<body>
${body.html}
</body>
</html>
`;
}
