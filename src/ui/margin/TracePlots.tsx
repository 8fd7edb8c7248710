import { useCallback, useMemo, useRef } from "react";
import type { LegTraces } from "../../core/flight/index.ts";
import type { Limits } from "../../core/show/index.ts";
import { saySeconds, sayTime } from "../say-place.ts";
import { useStudio } from "../studio-context.ts";
import { useFrame } from "../use-frame.ts";
import { layPlots, type Plot } from "./trace-plots.ts";

/**
 * Speed, climb, acceleration, height and gap of one leg over its time, each against its limit: the band is the whole
 * fleet, the line the drone that comes nearest to the limit. The playhead runs through all of them.
 */
export function TracePlots({ traces, limits }: { traces: LegTraces; limits: Limits }) {
	const studio = useStudio();
	const plots = useMemo(() => layPlots(traces, limits), [traces, limits]);
	const frame = useRef<HTMLDivElement>(null);
	const begins = traces.times[0];
	const ends = traces.times[traces.times.length - 1];
	const draw = useCallback(
		(seconds: number) => {
			const share = (seconds - begins) / Math.max(1e-9, ends - begins);
			const inside = share >= 0 && share <= 1;
			for (const line of frame.current?.querySelectorAll<HTMLElement>(".plot-head") ?? []) {
				line.style.left = `${100 * share}%`;
				line.hidden = !inside;
			}
		},
		[begins, ends],
	);
	useFrame(draw);
	const seekTo = (event: React.PointerEvent<HTMLDivElement>) => {
		const { left, width } = event.currentTarget.getBoundingClientRect();
		studio.commands.seek(begins + ((event.clientX - left) / width) * (ends - begins));
	};
	return (
		<div className="plots" ref={frame}>
			{plots.map((plot) => (
				<figure key={plot.name} className="plot">
					<figcaption>
						<span>
							{plot.name}, {plot.unit}
						</span>
						<span className={plot.broken ? "trouble" : "quiet"}>{plot.words}</span>
					</figcaption>
					<div className="plot-scale" aria-hidden="true">
						{plot.marks.map(({ value, at }) => (
							<span key={value} style={{ top: `${100 * at}%` }}>
								{value}
							</span>
						))}
					</div>
					<div className="plot-area" onPointerDown={seekTo}>
						<PlotLines plot={plot} begins={begins} />
						<span className="plot-head" hidden />
					</div>
					<div className="plot-times" aria-hidden="true">
						<span>0</span>
						<span>{saySeconds((ends - begins) / 2)}</span>
						<span>{saySeconds(ends - begins)}</span>
					</div>
				</figure>
			))}
		</div>
	);
}

function PlotLines({ plot, begins }: { plot: Plot; begins: number }) {
	const whose = plot.drone === null ? "" : ` The line is drone ${plot.drone}, the band the whole fleet.`;
	const label = `${plot.name} over the time of the flight: ${plot.words}, ${saySeconds(plot.time - begins)} after departure, at ${sayTime(plot.time)}.${whose}`;
	return (
		<svg viewBox="0 0 100 100" preserveAspectRatio="none" role="img" aria-label={label}>
			{plot.band !== null && <path className="plot-band" d={plot.band} />}
			{plot.limits.map((at) => (
				<line key={at} className="plot-limit" x1="0" x2="100" y1={100 * at} y2={100 * at} />
			))}
			<path className={plot.broken ? "plot-line bad" : "plot-line"} d={plot.line} />
		</svg>
	);
}
