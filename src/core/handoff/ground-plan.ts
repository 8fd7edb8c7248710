import type { FallZone } from "../flight/index.ts";
import type { Show } from "../show/index.ts";
import { type Html, html } from "./html.ts";

/** Metres of paper about what is drawn. */
const EDGE = 12;

/** Places of the take-off grid that are drawn at most. */
const MOST_PLACES = 1000;

type Corner = readonly [number, number];

/**
 * The ground from above, away from the audience upwards: flight volume, buffer, fall zone, audience line, seat. Drawn in
 * metres; lines differ by their dashes, so that it reads in black and white.
 */
export function groundPlan(show: Show, zone: FallZone | null, ground: ArrayLike<number> | null): Html {
	const { volume, buffer, audience, seat } = show.venue;
	const { min, max } = volume;
	const border: Corner[] = [
		[min[0] - buffer, min[1] - buffer],
		[max[0] + buffer, max[1] + buffer],
	];
	const corners: Corner[] = [...border, ...(zone?.outline ?? []), [seat[0], seat[1]]];
	if (audience !== null) corners.push(audience.from, audience.to);
	const [x0, x1] = [Math.min(...corners.map(([x]) => x)) - EDGE, Math.max(...corners.map(([x]) => x)) + EDGE];
	const [y0, y1] = [Math.min(...corners.map(([, y]) => y)) - EDGE, Math.max(...corners.map(([, y]) => y)) + EDGE];
	// The page's y runs downwards.
	const at = (x: number, y: number): string => `${x.toFixed(1)},${(-y).toFixed(1)}`;
	const box = (by: number): Html =>
		html`<rect x="${(min[0] - by).toFixed(1)}" y="${(-max[1] - by).toFixed(1)}" width="${(max[0] - min[0] + 2 * by).toFixed(1)}" height="${(max[1] - min[1] + 2 * by).toFixed(1)}" class="${by === 0 ? "volume" : "buffer"}"/>`;
	const count = ground === null ? 0 : ground.length / 3;
	// Of a very large fleet some places stand for all.
	const every = Math.max(1, Math.ceil(count / MOST_PLACES));
	const places = Array.from({ length: Math.ceil(count / every) }, (_, i) => i * every);
	const blocked = show.venue.blocked.map(
		({ min: low, max: high }) =>
			html`<rect x="${low[0].toFixed(1)}" y="${(-high[1]).toFixed(1)}" width="${(high[0] - low[0]).toFixed(1)}" height="${(high[1] - low[1]).toFixed(1)}" class="blocked"/>`,
	);
	const ruler = rulerOf(x1 - x0);
	return html`<figure class="plan"><svg viewBox="${x0.toFixed(1)} ${(-y1).toFixed(1)} ${(x1 - x0).toFixed(1)} ${(y1 - y0).toFixed(1)}" role="img" aria-label="Ground plan with flight volume, buffer, fall zone and audience line">
${box(0)}${buffer > 0 ? box(buffer) : null}${blocked}
${places.map((i) => html`<circle cx="${(ground?.[3 * i] ?? 0).toFixed(1)}" cy="${(-(ground?.[3 * i + 1] ?? 0)).toFixed(1)}" r="0.6" class="place"/>`)}
${zone === null ? null : html`<polygon points="${zone.outline.map(([x, y]) => at(x, y)).join(" ")}" class="zone"/>`}
${audience === null ? null : html`<line x1="${audience.from[0]}" y1="${-audience.from[1]}" x2="${audience.to[0]}" y2="${-audience.to[1]}" class="audience"/>`}
<circle cx="${seat[0]}" cy="${-seat[1]}" r="1.6" class="seat"/>
<line x1="${(x0 + 4).toFixed(1)}" y1="${(-y0 - 4).toFixed(1)}" x2="${(x0 + 4 + ruler).toFixed(1)}" y2="${(-y0 - 4).toFixed(1)}" class="ruler"/>
</svg>
<figcaption>From above, the audience at the foot. <span class="key zone-key">fall zone</span> <span class="key volume-key">flight volume</span> <span class="key buffer-key">buffer</span> <span class="key audience-key">audience line</span> Small dots: take-off grid; ring: reference seat. The bar is ${ruler} m.</figcaption></figure>
`;
}

/** A round length of about a sixth of what is drawn. */
function rulerOf(width: number): number {
	return [1, 2, 5, 10, 20, 50, 100, 200, 500].findLast((length) => length <= width / 6) ?? 1;
}
