import { describe, expect, it } from "vitest";
import { CAUTIONS } from "../../../src/core/handoff/cautions.ts";
import { listCues } from "../../../src/core/handoff/cue-list.ts";
import { type ReportInput, writeReport } from "../../../src/core/handoff/report.ts";
import { revisionCode } from "../../../src/core/handoff/revision.ts";
import { applyEdit, setTitle } from "../../../src/core/show/index.ts";
import { careOf, checkOf, show } from "./sample-check.ts";

const timecode = { rate: "29.97", start: "01:00:00:00" } as const;
const revision = revisionCode(show);

function report(change: Partial<ReportInput> = {}): string {
	const check = checkOf(["flies"]);
	return writeReport({
		show,
		check,
		care: careOf(),
		flight: null,
		lines: listCues(show, check, timecode),
		end: 60,
		revision,
		draft: false,
		timecode,
		flashes: [],
		notes: [],
		rates: { positions: 10, light: 50 },
		...change,
	});
}

describe("the report", () => {
	const page = report();

	it("carries every caution and the revision code under each heading and on each printed page", () => {
		for (const caution of CAUTIONS) expect(page).toContain(caution);
		const headings = page.match(/<h2.*?<\/h2>/g) ?? [];
		expect(headings.length).toBeGreaterThan(7);
		for (const heading of headings) expect(heading).toContain(revision);
		expect(page).toMatch(new RegExp(`@bottom-left \\{ content: "[^"]*revision ${revision}"`));
	});

	it("keeps names from becoming markup, and asks for nothing outside itself", () => {
		expect(page).not.toContain("<b>&quot;");
		expect(page).not.toMatch(/<b>"night"/);
		expect(page).toContain("Harbour &lt;b&gt;&quot;night&quot;&lt;/b&gt; &amp; fire");
		expect(page).not.toMatch(/<script|<link|<img|src=|href=|url\(/);
		expect(page).toContain("default-src 'none'");
	});

	it("lets no title end the page's style", () => {
		const { show: evil } = applyEdit(show, (draft) => setTitle(draft, '"} </style><script>alert(1)</script>'));
		expect(report({ show: evil })).not.toContain("<script>");
	});

	it("says the answer, the limits, the tolerance, endurance and the run sheet's called cue with its standby", () => {
		expect(page).toContain("The show flies, as planned and within the limits below.");
		expect(page).toContain("<td>6 m/s</td>");
		expect(page).toContain("a gap may stand 2 mm under the spacing and no more");
		expect(page).toContain("against 675.0 s (endurance less reserve): held");
		expect(page).toContain("12.5 CALLED");
		expect(page.match(/Standby/g)?.length).toBe(1);
		expect(page).toContain("drop-frame");
		expect(page).toContain("01:00:06;15");
	});

	it("says what needs attention first, and the whole show in sentences with what they rest on", () => {
		const [before, after] = page.replaceAll("\u00a0", " ").split("The show as a whole");
		expect(before).toContain("Needs attention");
		expect(before).toContain("Fall zone: A drone that loses power comes down as far as 48 m");
		expect(before).not.toContain("Impact energy:");
		expect(after).toContain("The fall zone reaches 3.2 m past the audience line (drone 5 at 0:12)");
		expect(after).toContain(
			"It stays 6.5 m inside the flight volume and its buffer of 10 m; nearest on the audience&#39;s left.",
		);
		expect(after).toContain("14.9 J (14 CFR 107.120) is passed after a fall of 3.5 m");
		expect(after).toContain("These are marks on a scale, not a permission.");
		expect(after).toContain(
			"In Heart, after cue 12, 4 drones stand in the wake of others for 9.5 s, drone 3 under 2 of them.",
		);
		expect(after).toContain("Tilt Heart by 10°, away from the audience at its head.");
		expect(after).toContain(
			"The smallest gap as flown is 1.40 m (spacing 1.5 m), drones 1 and 4 in cue 12 at 0:13; in a gust 1.32 m.",
		);
		expect(after).toContain("An estimate, not a bound.");
		expect(page).not.toMatch(/\b(is|are) safe\b/);
	});

	it("draws the ground with the fall zone's own corners", () => {
		const svg = /<svg viewBox.*?<\/svg>/s.exec(page)?.[0] ?? "";
		expect(svg).toContain('<polygon points="20.0,0.0 0.0,-30.0 -20.0,0.0" class="zone"/>');
		expect(svg).toContain('x="-110.0"');
	});

	it("has nothing to see to where nothing was found", () => {
		const calm = report({ care: { ...careOf(), fallZone: null, wakeHolds: [], wakeRemedies: [], airtime: null } });
		expect(calm).toContain("Nothing beside the cautions was found that someone has to see to first.");
	});

	it("calls a draft a draft, and says what would make it fly", () => {
		const draft = report({ draft: true, check: checkOf(["too-fast"]), rates: null, flashes: ["Four flashes at 3 s."] });
		expect(draft).toContain("DRAFT: this hand-off holds no flight paths. Not for flight.");
		expect(draft).toContain("The show can&#39;t be flown as it stands.");
		expect(draft).toContain("Depart 3 beats earlier. The hold loses 1.5 s.");
		expect(draft).toContain("Four flashes at 3 s.");
		expect(draft).not.toContain("it is this interpolated file that was proven");
	});
});

describe("the revision code", () => {
	it("is the same for the same show and another for any other", () => {
		expect(revision).toMatch(/^[0-9A-HJKMNP-TV-Z]{4}-[0-9A-HJKMNP-TV-Z]{4}$/);
		expect(revisionCode({ ...show })).toBe(revision);
		const { show: other } = applyEdit(show, (draft) => setTitle(draft, "Harbour"));
		expect(revisionCode(other)).not.toBe(revision);
	});
});
