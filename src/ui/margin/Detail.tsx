import { cuesInTime } from "../../core/show/index.ts";
import { sayPlace, saySeconds, sayTime } from "../say-place.ts";
import { useStudio, useStudioState } from "../studio-context.ts";
import { useBeatMap } from "../use-frame.ts";
import { ColourDetail } from "./ColourDetail.tsx";
import { IntensityDetail } from "./IntensityDetail.tsx";
import { Overview } from "./Overview.tsx";
import { SectionDetail } from "./SectionDetail.tsx";
import { TransitionDetail } from "./TransitionDetail.tsx";

/** What is selected, as a note: sentences first, then the fields, then remedies. */
export function Detail() {
	const selection = useStudioState((state) => state.selection);
	const cues = useStudioState((state) => state.show?.cues);
	const sections = useStudioState((state) => state.show?.sections);
	if (selection.kind === "section") {
		const section = sections?.find((one) => one.id === selection.id);
		if (section) return <SectionDetail section={section} />;
	}
	if (selection.kind !== "cues") return <Overview />;
	if (selection.ids.length > 1) return <SeveralCues ids={selection.ids} />;
	const cue = cues?.byId[selection.ids[0]];
	if (cue?.kind === "transition") return <TransitionDetail key={cue.id} cue={cue} />;
	if (cue?.kind === "colour") return <ColourDetail key={cue.id} cue={cue} />;
	if (cue?.kind === "intensity") return <IntensityDetail key={cue.id} cue={cue} />;
	return <Overview />;
}

function SeveralCues({ ids }: { ids: readonly string[] }) {
	const { commands } = useStudio();
	const beatMap = useBeatMap();
	const show = useStudioState((state) => state.show);
	const readOnly = useStudioState((state) => state.readOnly !== null);
	if (!show) return null;
	const chosen = cuesInTime(show, beatMap).filter((cue) => ids.includes(cue.id));
	const first = chosen[0];
	const last = chosen.at(-1);
	return (
		<>
			<h2>{ids.length} cues</h2>
			{first && last && (
				<p>
					From {sayPlace(first.at, beatMap)} ({sayTime(beatMap.secondsAt(first.at))}) to {sayPlace(last.at, beatMap)},{" "}
					{saySeconds(beatMap.secondsAt(last.at) - beatMap.secondsAt(first.at))} in all.
				</p>
			)}
			<div className="buttons">
				<button type="button" disabled={readOnly} onClick={() => commands.moveCues(ids, -1)}>
					One beat earlier
				</button>
				<button type="button" disabled={readOnly} onClick={() => commands.moveCues(ids, 1)}>
					One beat later
				</button>
				<button type="button" disabled={readOnly} onClick={() => commands.removeCues(ids)}>
					Remove
				</button>
			</div>
		</>
	);
}
