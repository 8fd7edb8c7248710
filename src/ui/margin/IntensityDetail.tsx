import { cuePosition, type IntensityCue } from "../../core/show/index.ts";
import { ChoiceField, NumberField } from "../fields/Field.tsx";
import { sayBeats, sayPlace } from "../say-place.ts";
import { useStudio, useStudioState } from "../studio-context.ts";
import { useBeatMap } from "../use-frame.ts";
import { CueFields, LightCueFields } from "./CueFields.tsx";

/** Faders are perceptual, the file holds linear light: 50 % on the fader is a quarter of the light. */
const toFader = (light: number) => Math.round(Math.sqrt(light) * 100);
const toLight = (fader: number) => (Math.min(100, Math.max(0, fader)) / 100) ** 2;

export function IntensityDetail({ cue }: { cue: IntensityCue }) {
	const { commands } = useStudio();
	const beatMap = useBeatMap();
	const analysis = useStudioState((state) => state.analysis);
	const readOnly = useStudioState((state) => state.readOnly !== null);
	const at = cuePosition(cue, beatMap);
	const level = cue.level;
	const follows = typeof level === "number" ? "steady" : level.follow;
	const sources = [
		{ value: "steady", name: "a steady level" },
		...(analysis?.curves ?? []).map((curve) => ({ value: curve.name, name: `the music: ${curve.name}` })),
	];
	if (!sources.some((source) => source.value === follows))
		sources.push({ value: follows, name: `the music: ${follows}` });
	return (
		<>
			<h2 aria-live="polite">Cue {cue.number} · intensity</h2>
			<p>
				From {sayPlace(at, beatMap)} the light of {cue.group}{" "}
				{typeof level === "number" ? `goes to ${toFader(level)} %` : `follows the ${level.follow} of the music`}
				{cue.fade > 0 ? ` within ${sayBeats(cue.fade)}` : ", at once"}.
			</p>
			<div className="fields">
				<LightCueFields cue={cue} />
				<ChoiceField
					label="goes with"
					value={follows}
					choices={sources}
					disabled={readOnly}
					onSet={(name) =>
						commands.changeCue(cue.id, { level: name === "steady" ? 0.8 : { follow: name, from: 0.2, to: 1 } })
					}
				/>
				{typeof level === "number" ? (
					<NumberField
						label="level"
						unit="%"
						value={toFader(level)}
						step={5}
						disabled={readOnly}
						onSet={(fader) => commands.changeCue(cue.id, { level: toLight(fader) })}
					/>
				) : (
					<>
						<NumberField
							label="quiet"
							unit="%"
							value={toFader(level.from)}
							step={5}
							disabled={readOnly}
							onSet={(fader) => commands.changeCue(cue.id, { level: { ...level, from: toLight(fader) } })}
						/>
						<NumberField
							label="loud"
							unit="%"
							value={toFader(level.to)}
							step={5}
							disabled={readOnly}
							onSet={(fader) => commands.changeCue(cue.id, { level: { ...level, to: toLight(fader) } })}
						/>
					</>
				)}
			</div>
			<CueFields cue={cue} />
		</>
	);
}
