import { type ColourCue, type Cue, cuePosition, type IntensityCue } from "../../core/show/index.ts";
import { CheckField, ChoiceField, NumberField, TextField } from "../fields/Field.tsx";
import { PlaceField } from "../fields/PlaceField.tsx";
import { useStudio, useStudioState } from "../studio-context.ts";
import { useBeatMap } from "../use-frame.ts";

/** The fields that cues of every kind have. */
export function CueFields({ cue }: { cue: Cue }) {
	const { commands } = useStudio();
	const beatMap = useBeatMap();
	const readOnly = useStudioState((state) => state.readOnly !== null);
	return (
		<>
			<div className="fields">
				<TextField
					label="name"
					value={cue.name}
					disabled={readOnly}
					onSet={(name) => commands.changeCue(cue.id, { name })}
				/>
				<TextField
					label="number"
					value={cue.number}
					disabled={readOnly}
					onSet={(number) => commands.renumberCue(cue.id, number)}
				/>
				<TextField
					label="note for the crew"
					wide
					value={cue.note}
					disabled={readOnly}
					onSet={(note) => commands.changeCue(cue.id, { note })}
				/>
			</div>
			<div className="checks">
				<CheckField
					label="a person calls it"
					value={cue.called}
					disabled={readOnly}
					onSet={(called) => commands.changeCue(cue.id, { called })}
				/>
				<CheckField
					label="pinned to its time"
					value={cue.pinned !== undefined}
					disabled={readOnly}
					onSet={(pin) => commands.changeCue(cue.id, { pinned: pin ? beatMap.secondsAt(cue.at) : undefined })}
				/>
				<button type="button" className="plain" disabled={readOnly} onClick={() => commands.removeCues([cue.id])}>
					Remove the cue
				</button>
			</div>
		</>
	);
}

/** Where a cue of light begins, how long it fades, and for whom it is. */
export function LightCueFields({ cue }: { cue: ColourCue | IntensityCue }) {
	const { commands } = useStudio();
	const beatMap = useBeatMap();
	const readOnly = useStudioState((state) => state.readOnly !== null);
	const groups = useGroupChoices();
	return (
		<>
			<PlaceField
				label="at"
				value={cuePosition(cue, beatMap)}
				beatMap={beatMap}
				disabled={readOnly}
				onSet={(position) => commands.moveCue(cue.id, position)}
			/>
			<NumberField
				label="fade"
				unit="beats"
				value={cue.fade}
				step={0.5}
				disabled={readOnly}
				onSet={(fade) => commands.changeCue(cue.id, { fade })}
			/>
			<ChoiceField
				label="group"
				value={cue.group}
				choices={groups}
				disabled={readOnly}
				onSet={(group) => commands.changeCue(cue.id, { group })}
			/>
		</>
	);
}

/** Groups that a cue can be for: all, the show's groups of drones, and the groups of its formations. */
function useGroupChoices(): { value: string; name: string }[] {
	const show = useStudioState((state) => state.show);
	const slots = useStudioState((state) => state.slots);
	const names = new Set<string>(["all"]);
	for (const id of show?.groups.order ?? []) names.add(show?.groups.byId[id].name ?? id);
	for (const one of slots?.values() ?? []) for (const name of one.groups.keys()) names.add(name);
	return [...names].map((name) => ({ value: name, name }));
}
