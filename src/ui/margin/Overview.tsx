import { sayCare } from "../../core/flight/index.ts";
import { doubtfulPlaces } from "../../core/music/index.ts";
import { desk } from "../desk.ts";
import { TextField } from "../fields/Field.tsx";
import { saySeconds, sayTime } from "../say-place.ts";
import { useStudio, useStudioState } from "../studio-context.ts";
import { toDoubt } from "../to-doubt.ts";
import { Cautions } from "./Margin.tsx";

/** Nothing is selected: how the show stands, and what to do next. */
export function Overview() {
	const studio = useStudio();
	const { commands } = studio;
	const show = useStudioState((state) => state.show);
	const analysis = useStudioState((state) => state.analysis);
	const soundNotes = useStudioState((state) => state.soundNotes);
	const audioReady = useStudioState((state) => state.audioReady);
	const check = useStudioState((state) => state.check);
	const care = useStudioState((state) => state.care);
	const busy = useStudioState((state) => state.jobs.length > 0);
	const readOnly = useStudioState((state) => state.readOnly !== null);
	if (!show) return null;
	const matters = care ? sayCare(show, care).filter(({ attention }) => attention) : [];
	const doubtful = analysis ? doubtfulPlaces(show.grid, analysis).length : 0;
	const notes = new Set([...soundNotes, ...(analysis?.notes ?? []), ...(check?.notes ?? [])]);
	const noCues = show.cues.order.length === 0;
	return (
		<>
			<h2>The show</h2>
			<p>
				{show.fleet.count} {show.fleet.count === 1 ? "drone" : "drones"}, {show.formations.order.length} formations,{" "}
				{show.cues.order.length} cues
				{show.soundtrack ? `, ${sayTime(show.soundtrack.duration).replace(/\.\d+$/, "")} of music` : ", no music yet"}.
				{analysis &&
					analysis.beats.length > 1 &&
					` About ${Math.round(analysis.tempo.bpm)} beats a minute, ${sayConfidence(analysis.confidence)}.`}
				{check && ` In the air for ${saySeconds(check.endurance.airborne)} of ${saySeconds(check.endurance.limit)}.`}
			</p>
			{show.soundtrack && !audioReady && !busy && (
				<p className="trouble">
					The soundtrack {show.soundtrack.file} is not here: open it, and it is joined to this show.
				</p>
			)}
			{[...notes].map((note) => (
				<p key={note} className="quiet small">
					{note}
				</p>
			))}
			{doubtful > 0 && (
				<p>
					The beat is uncertain in {doubtful === 1 ? "one place" : `${doubtful} places`}, under a wavy line: listen
					there with the click track.
				</p>
			)}
			{matters.length > 0 && (
				<p>
					Beside the proof, {sayList(matters.map(({ heading }) => heading.toLowerCase()))}{" "}
					{matters.length === 1 ? "needs" : "need"} attention: see Care.
				</p>
			)}
			{noCues && analysis && (
				<p>
					Next: let Starstave make a rough cut from the music and work it over, or draw formations and put in cues by
					hand.
				</p>
			)}
			<div className="buttons">
				{analysis && (
					<button
						type="button"
						className={noCues ? "first" : ""}
						disabled={readOnly || busy}
						onClick={() => desk.setState({ asksRoughCut: true })}
					>
						Make a rough cut …
					</button>
				)}
				{doubtful > 0 && (
					<button type="button" onClick={() => toDoubt(studio)}>
						Next uncertain beat
					</button>
				)}
				{matters.length > 0 && (
					<button type="button" onClick={() => desk.setState({ margin: "care" })}>
						See Care
					</button>
				)}
				<button type="button" onClick={() => desk.setState({ margin: "formations" })}>
					Formations
				</button>
			</div>
			<div className="fields">
				<TextField label="title" value={show.title} disabled={readOnly} onSet={(title) => commands.setTitle(title)} />
				<TextField
					label="notes"
					wide
					value={show.notes}
					disabled={readOnly}
					onSet={(notes) => commands.setNotes(notes)}
				/>
			</div>
			<Cautions />
		</>
	);
}

/** "a, b and c" */
function sayList(items: readonly string[]): string {
	return items.length < 2 ? items.join("") : `${items.slice(0, -1).join(", ")} and ${items.at(-1)}`;
}

function sayConfidence(confidence: number): string {
	if (confidence > 0.7) return "heard clearly";
	return confidence > 0.35
		? "heard fairly well: check the beats with the click track"
		: "heard badly: set the beats by ear";
}
