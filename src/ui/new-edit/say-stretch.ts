import type { Stretch } from "../../core/retime/index.ts";
import type { BeatMap } from "../../core/show/index.ts";
import { saySeconds, sayTime } from "../say-place.ts";

/** "8 bars", "1 bar", else seconds. */
export function sayLength(from: number, to: number, beatMap: BeatMap): string {
	const bars = barsBetween(from, to, beatMap);
	if (bars === null) return saySeconds(to - from);
	return bars === 1 ? "1 bar" : `${bars} bars`;
}

function barsBetween(from: number, to: number, beatMap: BeatMap): number | null {
	const [a, b] = [from, to].map((time) => beatMap.barAt(Math.round(beatMap.positionAt(time) * 20) / 20));
	if (Math.abs(a.beat - b.beat) > 0.11 || b.bar <= a.bar) return null;
	return b.bar - a.bar;
}

/** "1.2 % faster"; empty where the tempo is kept. */
export function sayRate(rate: number | null): string {
	if (rate === null || Math.abs(rate - 1) < 5e-5) return "";
	const share = Math.abs(rate - 1) * 100;
	return `${share.toFixed(share < 0.95 ? 2 : 1)} % ${rate > 1 ? "faster" : "slower"}`;
}

/** What became of one stretch, as a sentence. */
export function sayStretch(stretch: Stretch, old: BeatMap, current: BeatMap): string {
	switch (stretch.kind) {
		case "cut":
			return `Cut: ${sayLength(stretch.old[0], stretch.old[1], old)}, from ${sayTime(stretch.old[0])} to ${sayTime(stretch.old[1])} of the old soundtrack.`;
		case "inserted":
			return `Put in: ${sayLength(stretch.new[0], stretch.new[1], current)}, from ${sayTime(stretch.new[0])} to ${sayTime(stretch.new[1])} of the new soundtrack.`;
		default: {
			const rate = sayRate(stretch.rate);
			const how = stretch.exact ? "sample for sample" : saySure(stretch.confidence);
			return `Kept: ${sayLength(stretch.old[0], stretch.old[1], old)} from ${sayTime(stretch.old[0])}, now from ${sayTime(stretch.new[0])}${rate ? `, ${rate}` : ""}; ${how}.`;
		}
	}
}

/** How sure it is that this, and no other place, is where the music went. */
export function saySure(confidence: number): string {
	return confidence >= 0.7 ? "sure" : confidence >= 0.3 ? "fairly sure" : "unsure: listen to it";
}
