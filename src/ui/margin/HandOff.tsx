import { useState } from "react";
import { sayCare } from "../../core/flight/index.ts";
import { ChoiceField, TextField } from "../fields/Field.tsx";
import { useStudio, useStudioState } from "../studio-context.ts";
import { Cautions } from "./Margin.tsx";

const RATES = ["24", "25", "29.97", "30"] as const;
type Rate = (typeof RATES)[number];

/** Everything that leaves for the crew, and what it is made at. */
export function HandOff() {
	const { commands } = useStudio();
	const flies = useStudioState((state) => state.check?.flies ?? false);
	const show = useStudioState((state) => state.show);
	const care = useStudioState((state) => state.care);
	const matters = show && care ? sayCare(show, care).filter(({ attention }) => attention) : [];
	const pending = useStudioState((state) => state.unchecked.size > 0);
	const busy = useStudioState((state) => state.jobs.length > 0);
	const [rows, setRows] = useState<"5" | "10" | "20">("10");
	const [lightRows, setLightRows] = useState<"25" | "50">("50");
	const [rate, setRate] = useState<Rate>("25");
	const [start, setStart] = useState("01:00:00:00");
	const leave = (draft: boolean) =>
		commands.exportHandOff({ rate: Number(rows), lightRate: Number(lightRows), draft, timecode: { rate, start } });
	return (
		<>
			<h2>Hand-off</h2>
			<p>
				One zip for the crew: cue list, run sheet, report, and, where everything flies, flight paths and light of every
				drone. Each file carries the revision code.
			</p>
			<div className="fields">
				<ChoiceField
					label="flight path rows a second"
					value={rows}
					choices={(["5", "10", "20"] as const).map((value) => ({ value, name: value }))}
					onSet={setRows}
				/>
				<ChoiceField
					label="light rows a second"
					value={lightRows}
					choices={(["25", "50"] as const).map((value) => ({ value, name: value }))}
					onSet={setLightRows}
				/>
				<ChoiceField
					label="timecode, frames a second"
					value={rate}
					choices={RATES.map((value) => ({
						value,
						name: value === "29.97" ? "29.97 drop-frame" : value,
					}))}
					onSet={setRate}
				/>
				<TextField
					label="timecode of the first sample"
					value={start}
					onSet={(text) => {
						const right = /^\d\d:\d\d:\d\d[:;]\d\d$/.test(text);
						if (right) setStart(text);
						return right;
					}}
				/>
			</div>
			{matters.length > 0 && (
				<p>
					For the flight director to see to first: {matters.map(({ heading }) => heading.toLowerCase()).join("; ")}. The
					report says what; see Care too.
				</p>
			)}
			{!flies && !pending && (
				<p className="trouble">
					The show does not fly as it stands, so flight paths and light stay here. A draft carries the rest.
				</p>
			)}
			<div className="buttons">
				<button type="button" className="first" disabled={!flies || pending || busy} onClick={() => void leave(false)}>
					Make the hand-off
				</button>
				<button type="button" disabled={busy} onClick={() => void leave(true)}>
					Make a draft
				</button>
			</div>
			<Cautions />
		</>
	);
}
