import { useState } from "react";
import type { TransitionCheck, Verdict } from "../../core/flight/index.ts";
import { worstVerdict } from "../../staves/index.ts";
import { desk } from "../desk.ts";
import { sayBeats, sayPlace, saySeconds } from "../say-place.ts";
import { useStudio, useStudioState } from "../studio-context.ts";
import { useBeatMap } from "../use-frame.ts";
import { Cautions } from "./Margin.tsx";
import { VerdictMark } from "./VerdictMark.tsx";

type Filter = "all" | "trouble" | "tight";

/** Feasibility of the whole show: every transition, worst first, needed against available time as a picture. */
export function Verdicts() {
	const [filter, setFilter] = useState<Filter>("all");
	const { commands } = useStudio();
	const check = useStudioState((state) => state.check);
	const unchecked = useStudioState((state) => state.unchecked);
	const show = useStudioState((state) => state.show);
	if (!check || !show)
		return (
			<p className="quiet">
				Nothing has been checked yet: a show with two formations and a transition has something to check.
			</p>
		);
	const legs = [check.launch, ...check.transitions, check.landing].filter(
		(one): one is TransitionCheck => one !== null,
	);
	const failing = (one: TransitionCheck) => !one.verdicts.includes("flies");
	const chosen = legs
		.filter((one) => filter === "all" || (filter === "trouble" ? failing(one) : one.verdicts.includes("tight")))
		.sort((a, b) => share(b) - share(a));
	const fails = legs.filter(failing).length;
	const formations = check.formations.filter((one) => !one.verdicts.includes("flies"));
	const over = check.endurance.airborne > check.endurance.limit;
	const name = (one: TransitionCheck) => {
		const cue = show.cues.byId[one.id];
		return cue
			? `Cue ${cue.number} · to ${show.formations.byId[one.to]?.name || one.to}`
			: one.id === "launch"
				? "Launch"
				: "Landing";
	};
	return (
		<>
			<h2>
				{check.flies
					? "Every part of the plan flies"
					: fails > 0
						? `${fails} of ${legs.length} do not fly`
						: "The show does not fly as it stands"}
			</h2>
			<p>
				In the air for {saySeconds(check.endurance.airborne)}; endurance less reserve is{" "}
				{saySeconds(check.endurance.limit)}
				{over ? <strong className="trouble">: too long.</strong> : "."}
			</p>
			{formations.map((one) => (
				<p key={one.id} className="trouble">
					Formation {show.formations.byId[one.id]?.name || one.id}:{" "}
					{one.verdicts.includes("too-close")
						? `its closest slots are ${one.gap.toFixed(2)} m apart`
						: "it reaches out of the venue"}
					.
				</p>
			))}
			<fieldset className="filter">
				<legend className="unseen">Which are shown</legend>
				{(["all", "trouble", "tight"] as const).map((one) => (
					<label key={one}>
						<input type="radio" name="verdicts" checked={filter === one} onChange={() => setFilter(one)} />
						{one === "all" ? "all" : one === "trouble" ? "do not fly" : "tight"}
					</label>
				))}
			</fieldset>
			{chosen.length === 0 && <p className="quiet">None of this kind.</p>}
			<ul className="verdicts">
				{chosen.map((one) => (
					<li key={one.id}>
						<button
							type="button"
							className="plain"
							onClick={() => {
								if (show.cues.byId[one.id]) commands.select({ kind: "cues", ids: [one.id] });
								commands.seek(one.gap && worstVerdict(one.verdicts) !== "too-fast" ? one.gap.time : one.departs.time);
								desk.setState({ margin: show.cues.byId[one.id] ? "detail" : "verdicts" });
							}}
						>
							<VerdictMark verdict={unchecked.has(one.id) ? null : worstVerdict(one.verdicts)} />
							<span>{name(one)}</span>
							<TimeBar check={one} />
							<Short check={one} />
						</button>
					</li>
				))}
			</ul>
			<Cautions />
		</>
	);
}

/** Needed time over available time: what the list is sorted by. */
function share(check: TransitionCheck): number {
	const spatial: readonly Verdict[] = ["too-close", "out-of-venue"];
	if (check.needed === null || spatial.some((verdict) => check.verdicts.includes(verdict)))
		return Number.POSITIVE_INFINITY;
	return check.needed / Math.max(1e-6, check.available);
}

/** Outline = the time it has, fill = the time it needs. */
function TimeBar({ check }: { check: TransitionCheck }) {
	const needed = check.needed ?? check.available * 1.5;
	const most = Math.max(needed, check.available, 1e-6) * 1.02;
	const bad = needed > check.available + 1e-9;
	return (
		<svg className="time-bar" viewBox="0 0 100 10" preserveAspectRatio="none" aria-hidden="true">
			<rect className={bad ? "fill bad" : "fill"} x="0" y="2" height="6" width={(100 * needed) / most} />
			<rect className="outline" x="0.5" y="0.5" height="9" width={(99 * check.available) / most} />
		</svg>
	);
}

function Short({ check }: { check: TransitionCheck }) {
	const beatMap = useBeatMap();
	if (check.needed === null) return <span className="small trouble">no time is enough</span>;
	if (check.slackBeats !== null && check.slackBeats < 0)
		return <span className="small trouble">{sayBeats(-check.slackBeats)} short</span>;
	const where = check.departs.beat === null ? saySeconds(check.available) : sayPlace(check.departs.beat, beatMap);
	return <span className="small quiet">{where}</span>;
}
