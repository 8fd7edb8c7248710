import type { TransitionCheck } from "../../core/flight/index.ts";
import { cuePosition, type TransitionCue, transitionsInTime } from "../../core/show/index.ts";
import { ChoiceField } from "../fields/Field.tsx";
import { PlaceField } from "../fields/PlaceField.tsx";
import { sayBeats, sayPlace, saySeconds } from "../say-place.ts";
import { useStudio, useStudioState } from "../studio-context.ts";
import { useBeatMap } from "../use-frame.ts";
import { useLookInto } from "../use-look-into.ts";
import { CueFields } from "./CueFields.tsx";
import { Remedies } from "./Remedies.tsx";
import { sayBreach } from "./say-trouble.ts";
import { VerdictMark } from "./VerdictMark.tsx";

const LIGHT = [
	{ value: "keep", name: "keep" },
	{ value: "dim", name: "dim" },
	{ value: "dark", name: "dark" },
	{ value: "crossfade", name: "cross-fade" },
] as const;
const LAWS = [
	{ value: "s-curve", name: "S-curve" },
	{ value: "minimum-jerk", name: "minimum jerk" },
] as const;

export function TransitionDetail({ cue }: { cue: TransitionCue }) {
	const { commands } = useStudio();
	const beatMap = useBeatMap();
	const show = useStudioState((state) => state.show);
	const check = useStudioState((state) => state.check?.transitions.find((one) => one.id === cue.id) ?? null);
	const waiting = useStudioState((state) => state.unchecked.has(cue.id));
	const readOnly = useStudioState((state) => state.readOnly !== null);
	const failing = check !== null && !waiting && !check.verdicts.includes("flies");
	const inquired = useLookInto("leg", failing ? cue.id : null);
	if (!show) return null;
	const departs = cuePosition(cue, beatMap);
	const arrives = departs + cue.length;
	const nameOf = (id: string) => show.formations.byId[id]?.name || id;
	const before = transitionsInTime(show, beatMap)
		.filter((one) => cuePosition(one, beatMap) < departs - 1e-9)
		.at(-1);
	const from = before?.formation ?? show.opening;
	const available = beatMap.secondsAt(arrives) - beatMap.secondsAt(departs);
	return (
		<>
			<h2 aria-live="polite">
				Cue {cue.number} · to {nameOf(cue.formation)}
			</h2>
			<p>
				Departs {from === null ? "" : `${nameOf(from)} at `}
				{sayPlace(departs, beatMap)}. Arrives {sayPlace(arrives, beatMap)}, after {saySeconds(available)}.{" "}
				<Needs check={check} waiting={waiting} />
			</p>
			{check?.breach && <p className="trouble">{sayBreach(check.breach, show)}</p>}
			{check && <Figures check={check} />}
			<div className="fields">
				<PlaceField
					label="departs"
					value={departs}
					beatMap={beatMap}
					disabled={readOnly}
					onSet={(at) => commands.changeCue(cue.id, { at, length: arrives - at })}
				/>
				<PlaceField
					label="arrives"
					value={arrives}
					beatMap={beatMap}
					disabled={readOnly}
					onSet={(at) => commands.changeCue(cue.id, { length: at - departs })}
				/>
				<ChoiceField
					label="formation"
					value={cue.formation}
					disabled={readOnly}
					choices={show.formations.order.map((id) => ({ value: id, name: nameOf(id) }))}
					onSet={(formation) => commands.changeCue(cue.id, { formation })}
				/>
				<ChoiceField
					label="light on the way"
					value={cue.light}
					choices={LIGHT}
					disabled={readOnly}
					onSet={(light) => commands.changeCue(cue.id, { light })}
				/>
				<ChoiceField
					label="time law"
					value={cue.timeLaw}
					choices={LAWS}
					disabled={readOnly}
					onSet={(timeLaw) => commands.changeCue(cue.id, { timeLaw })}
				/>
			</div>
			{failing && check && <Remedies own={check.remedies} inquired={inquired} />}
			<CueFields cue={cue} />
		</>
	);
}

function Needs({ check, waiting }: { check: TransitionCheck | null; waiting: boolean }) {
	if (!check || waiting) return <span className="quiet">Being checked.</span>;
	if (check.needed === null) return <span className="trouble">No duration makes it fly.</span>;
	const short = check.slack !== null && check.slack < 0;
	return (
		<>
			It needs {saySeconds(check.needed)}
			{short ? (
				<>
					: <strong className="trouble">{sayBeats(-(check.slackBeats ?? 0))} short</strong>.
				</>
			) : (
				<>, {sayBeats(check.slackBeats ?? 0)} in hand.</>
			)}
		</>
	);
}

function Figures({ check }: { check: TransitionCheck }) {
	const { peak, gap, verdicts } = check;
	return (
		<p className="figures">
			{verdicts.map((verdict) => (
				<VerdictMark key={verdict} verdict={verdict} words />
			))}
			<span>
				At most {peak.horizontal.toFixed(1)} m/s level, {peak.climb.toFixed(1)} up, {peak.descent.toFixed(1)} down;{" "}
				{peak.acceleration.toFixed(1)} m/s², {peak.jerk.toFixed(1)} m/s³.
				{gap && ` Closest pair: ${gap.distance.toFixed(2)} m, drones ${gap.drones[0] + 1} and ${gap.drones[1] + 1}.`}
			</span>
		</p>
	);
}
