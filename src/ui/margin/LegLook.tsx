import { useEffect, useRef } from "react";
import type { TransitionCheck } from "../../core/flight/index.ts";
import type { Show } from "../../core/show/index.ts";
import { desk } from "../desk.ts";
import { useStudio, useStudioState } from "../studio-context.ts";
import { tightestMoment } from "../tightest-moment.ts";
import { useLookInto } from "../use-look-into.ts";
import { Remedies } from "./Remedies.tsx";
import { sayWhy } from "./say-trouble.ts";
import { TracePlots } from "./TracePlots.tsx";

/** One leg looked into: why it flies or doesn't, its figures over time, what would make it fly. */
export function LegLook({ check, show, waiting }: { check: TransitionCheck; show: Show; waiting: boolean }) {
	const { commands, store } = useStudio();
	const inquired = useLookInto("leg", check.id);
	const hasFlight = useStudioState((state) => state.flight !== null);
	const place = useRef<HTMLDivElement>(null);
	// Its row to the top, so that what has opened is seen.
	useEffect(() => {
		place.current?.parentElement?.scrollIntoView({ block: "start" });
	}, []);
	const isCue = show.cues.byId[check.id] !== undefined;
	const flies = check.verdicts.includes("flies");
	return (
		<div className="leg-look" ref={place}>
			<p>{waiting ? "Being checked." : sayWhy(check, show)}</p>
			{!flies && !isCue && !waiting && (
				<p>
					{check.id === "launch" ? "Launch" : "Landing"} is planned from the take-off grid: move the grid, or the
					formation {check.id === "launch" ? "that the fleet waits in" : "that the show ends in"}, so that the way
					between them is clear.
				</p>
			)}
			{!flies && isCue && !waiting && <Remedies own={check.remedies} inquired={inquired} />}
			{inquired?.traces ? (
				<TracePlots traces={inquired.traces} limits={show.fleet.limits} />
			) : (
				<p className="quiet small">Its figures over time are being worked out.</p>
			)}
			<div className="buttons">
				<button
					type="button"
					disabled={!hasFlight}
					onClick={() => {
						const { flight } = store.getState();
						if (flight) commands.seek(tightestMoment(check, flight, show.fleet.limits));
					}}
				>
					To its tightest moment
				</button>
				{isCue && (
					<button type="button" onClick={() => desk.setState({ margin: "detail" })}>
						Its fields
					</button>
				)}
			</div>
		</div>
	);
}
