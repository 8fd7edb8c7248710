import type { Section } from "../../core/show/index.ts";
import { TextField } from "../fields/Field.tsx";
import { PlaceField } from "../fields/PlaceField.tsx";
import { sayPlace, saySeconds } from "../say-place.ts";
import { splitHere } from "../split-section.ts";
import { useStudio, useStudioState } from "../studio-context.ts";
import { useBeatMap } from "../use-frame.ts";

export function SectionDetail({ section }: { section: Section }) {
	const studio = useStudio();
	const { commands } = studio;
	const beatMap = useBeatMap();
	const readOnly = useStudioState((state) => state.readOnly !== null);
	const [from, to] = [beatMap.secondsAt(section.from), beatMap.secondsAt(section.to)];
	const bars = beatMap.barAt(section.to).bar - beatMap.barAt(section.from).bar;
	return (
		<>
			<h2 aria-live="polite">
				Section {section.letter}
				{section.name && ` · ${section.name}`}
			</h2>
			<p>
				From {sayPlace(section.from, beatMap)}, {bars} {bars === 1 ? "bar" : "bars"} long, {saySeconds(to - from)}.
			</p>
			<div className="fields">
				<TextField
					label="name"
					value={section.name}
					disabled={readOnly}
					onSet={(name) => commands.renameSection(section.id, name)}
				/>
				<TextField
					label="letter"
					value={section.letter}
					disabled={readOnly}
					onSet={(letter) => commands.setSectionLetter(section.id, letter)}
				/>
				<PlaceField
					label="starts"
					value={section.from}
					beatMap={beatMap}
					disabled={readOnly}
					onSet={(at) => commands.moveSectionStart(section.id, Math.round(at))}
				/>
			</div>
			<p className="quiet small">Sections with the same letter are the same music.</p>
			<div className="buttons">
				<button type="button" disabled={readOnly} onClick={() => commands.setLoop({ from, to })}>
					Loop it
				</button>
				<button type="button" disabled={readOnly} onClick={() => commands.joinSections(section.id)}>
					Join with the next
				</button>
				<button type="button" disabled={readOnly} onClick={() => splitHere(studio)}>
					Split at the playhead
				</button>
				<button type="button" disabled={readOnly} onClick={() => commands.divideSections(-1)}>
					Coarser sections
				</button>
				<button type="button" disabled={readOnly} onClick={() => commands.divideSections(1)}>
					Finer sections
				</button>
			</div>
		</>
	);
}
