import { createBeatMap, endOfShow } from "../core/show/index.ts";
import type { ActionParts } from "./actions.ts";
import { desk } from "./desk.ts";

/** Shortest strip, beats. */
const CLOSEST = 8;

/**
 * Zooms about where the ear is (or `about`, beats). From the page, zooming in opens the strip on the section here;
 * zooming out beyond three sections' worth goes back to the page.
 */
export function zoomStrip(
	{ studio, loop }: Pick<ActionParts, "studio" | "loop">,
	how: number | "toggle",
	about?: number,
): void {
	const show = studio.store.getState().show;
	if (!show) return;
	const map = createBeatMap(show.grid);
	const centre = about ?? map.positionAt(loop.now);
	const { strip } = desk.getState();
	const first = map.positionAt(0);
	const last = map.positionAt(endOfShow(show, map));
	if (!strip) {
		if (how !== "toggle" && how >= 1) return;
		const section = show.sections.find((one) => centre >= one.from && centre < one.to);
		const from = section?.from ?? Math.max(first, centre - 16);
		desk.setState({ strip: { from, to: Math.max(from + CLOSEST, Math.min(section?.to ?? centre + 16, from + 64)) } });
		return;
	}
	if (how === "toggle") {
		desk.setState({ strip: null });
		return;
	}
	const length = Math.max(CLOSEST, (strip.to - strip.from) * how);
	if (length > 160 || length > (last - first) * 1.05) {
		desk.setState({ strip: null });
		return;
	}
	const share = Math.min(1, Math.max(0, (centre - strip.from) / (strip.to - strip.from)));
	const from = Math.max(Math.min(first, 0), centre - share * length);
	desk.setState({ strip: { from, to: from + length } });
}

/** Turns the strip's page when the ear leaves its window. */
export function followStrip(position: number): void {
	const { strip } = desk.getState();
	if (!strip || (position >= strip.from && position < strip.to)) return;
	const length = strip.to - strip.from;
	const from = position > strip.to ? position - length * 0.06 : position - length * 0.5;
	desk.setState({ strip: { from, to: from + length } });
}
