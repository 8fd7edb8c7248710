import { type ColourCue, cuePosition, type Paint } from "../../core/show/index.ts";
import { ChoiceField, ColourField, NumberField } from "../fields/Field.tsx";
import { sayBeats, sayPlace } from "../say-place.ts";
import { useStudio, useStudioState } from "../studio-context.ts";
import { useBeatMap } from "../use-frame.ts";
import { CueFields, LightCueFields } from "./CueFields.tsx";
import { freshPaint, PAINT_KINDS, paintFields, sayPaint } from "./paint-fields.ts";

export function ColourDetail({ cue }: { cue: ColourCue }) {
	const { commands } = useStudio();
	const beatMap = useBeatMap();
	const readOnly = useStudioState((state) => state.readOnly !== null);
	const at = cuePosition(cue, beatMap);
	const set = (paint: Paint) => commands.changeCue(cue.id, { paint });
	return (
		<>
			<h2 aria-live="polite">
				Cue {cue.number} · {sayPaint(cue.paint.kind)}
			</h2>
			<p>
				From {sayPlace(at, beatMap)} {cue.group === "all" ? "all slots" : `the slots of ${cue.group}`} show{" "}
				{sayPaint(cue.paint.kind)}
				{cue.fade > 0 ? `, faded in over ${sayBeats(cue.fade)}` : ", at once"}.
			</p>
			<div className="fields">
				<LightCueFields cue={cue} />
				<ChoiceField
					label="pattern"
					value={cue.paint.kind}
					choices={PAINT_KINDS}
					disabled={readOnly}
					onSet={(kind) => set(freshPaint(kind, cue.paint))}
				/>
				{paintFields(cue.paint).map((field) =>
					field.kind === "colour" ? (
						<ColourField
							key={field.key}
							label={field.label}
							value={field.value}
							disabled={readOnly}
							onSet={(colour) => set(field.write(colour))}
						/>
					) : field.kind === "number" ? (
						<NumberField
							key={field.key}
							label={field.label}
							step={field.step}
							value={field.value}
							disabled={readOnly}
							onSet={(value) => set(field.write(value))}
						/>
					) : (
						<ChoiceField
							key={field.key}
							label={field.label}
							value={field.value}
							choices={field.choices}
							disabled={readOnly}
							onSet={(value) => set(field.write(value))}
						/>
					),
				)}
			</div>
			<CueFields cue={cue} />
		</>
	);
}
