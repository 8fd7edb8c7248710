import { type Care as CareFound, type CareTopic, sayCare } from "../../core/flight/index.ts";
import type { Show } from "../../core/show/index.ts";
import { desk } from "../desk.ts";
import { saySeconds } from "../say-place.ts";
import { useStudio, useStudioState } from "../studio-context.ts";
import { EnergyBar } from "./EnergyBar.tsx";
import { Cautions } from "./Margin.tsx";

/** What the flight asks beyond its proof: sentences first, then figures, then what they rest on. */
export function Care() {
	const show = useStudioState((state) => state.show);
	const care = useStudioState((state) => state.care);
	const stale = useStudioState((state) => state.unchecked.size > 0);
	if (!show || !care)
		return (
			<>
				<h2>Care</h2>
				<p className="quiet">
					Nothing flies yet: with an opening or a transition, this page tells where a drone would fall, who stands in
					whose wake, and how far the fleet lags.
				</p>
			</>
		);
	const topics = sayCare(show, care);
	const open = topics.filter(({ attention }) => attention).length;
	return (
		<>
			<h2>
				{open === 0
					? "Nothing here needs attention first"
					: `${open} of ${topics.length} matters ${open === 1 ? "needs" : "need"} attention`}
			</h2>
			<p className="quiet small">
				Estimates beside the proof. They change no verdict, and none of them is a bound or a permission.
				{stale && " The show has changed: these are being worked out again."}
			</p>
			{topics.map((topic) => (
				<Topic key={topic.id} topic={topic} show={show} care={care} />
			))}
			<Cautions />
		</>
	);
}

function Topic({ topic, show, care }: { topic: CareTopic; show: Show; care: CareFound }) {
	return (
		<section className="care-topic" aria-label={topic.heading}>
			<h3>
				{topic.heading}
				{topic.attention && <span className="trouble small care-attention"> needs attention</span>}
			</h3>
			{topic.sentences.map((sentence) => (
				<p key={sentence}>{sentence}</p>
			))}
			{topic.id === "impact" && care.fallZone && <EnergyBar impact={care.fallZone.impact} />}
			{topic.id === "fall-zone" && <ZoneButtons audience={show.venue.audience !== null} wind={show.venue.wind} />}
			{topic.id === "wake" && <WakeRemedies care={care} />}
			{topic.id === "as-flown" && <FlownFigures show={show} care={care} />}
			<details className="small quiet">
				<summary>What this rests on</summary>
				{topic.assumptions.map((sentence) => (
					<p key={sentence}>{sentence}</p>
				))}
			</details>
		</section>
	);
}

function ZoneButtons({ audience, wind }: { audience: boolean; wind: number }) {
	return (
		<div className="buttons">
			<button type="button" onClick={() => desk.setState({ viewpoint: "plan" })}>
				See it on the ground
			</button>
			{(!audience || wind === 0) && (
				<button type="button" onClick={() => desk.setState({ margin: "fleet-venue" })}>
					Fleet &amp; venue
				</button>
			)}
		</div>
	);
}

function WakeRemedies({ care }: { care: CareFound }) {
	const { commands } = useStudio();
	const readOnly = useStudioState((state) => state.readOnly !== null);
	if (care.wakeRemedies.length === 0) return null;
	return (
		<ul className="remedies" aria-label="What would bring them out of the wake">
			{care.wakeRemedies.map((remedy) => (
				<li key={remedy.formation + remedy.kind}>
					<span>
						{remedy.change}
						<span className="quiet small">
							{remedy.cost} Smallest distance then {remedy.gap.toFixed(2)} m; the transitions to and from it are planned
							anew.
						</span>
					</span>
					<button
						type="button"
						disabled={readOnly}
						aria-label={`Apply: ${remedy.change}`}
						onClick={() => commands.changeFormation(remedy.formation, remedy.edit)}
					>
						Apply
					</button>
				</li>
			))}
		</ul>
	);
}

/** Cue by cue, the one with the smallest gap first. */
function FlownFigures({ show, care }: { show: Show; care: CareFound }) {
	const { commands } = useStudio();
	const gapOf = (leg: CareFound["asFlown"]["legs"][number]) => leg.gap?.distance ?? Number.POSITIVE_INFINITY;
	const legs = [...care.asFlown.legs].sort((a, b) => gapOf(a) - gapOf(b));
	if (legs.length === 0) return null;
	return (
		<table className="figures-table">
			<thead>
				<tr>
					<th scope="col">cue</th>
					<th scope="col">behind</th>
					<th scope="col">in slots after</th>
					<th scope="col">gap as flown</th>
					<th scope="col">in a gust</th>
				</tr>
			</thead>
			<tbody>
				{legs.map((leg) => (
					<tr key={leg.id}>
						<th scope="row">
							<button
								type="button"
								className="plain figures-cue"
								onClick={() => {
									commands.select({ kind: "cues", ids: [leg.id] });
									commands.seek(leg.gap?.time ?? leg.lag.time);
								}}
							>
								{show.cues.byId[leg.id]?.number ?? leg.id}
							</button>
						</th>
						<td>{leg.lag.distance.toFixed(2)} m</td>
						<td>{saySeconds(leg.settled)}</td>
						<td>{leg.gap ? `${leg.gap.distance.toFixed(2)} m` : "far"}</td>
						<td>{leg.gapInGust === null ? "far" : `${leg.gapInGust.toFixed(2)} m`}</td>
					</tr>
				))}
			</tbody>
		</table>
	);
}
