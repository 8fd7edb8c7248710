import { useEffect, useRef } from "react";
import { sizeToSpacing } from "../../core/formation/index.ts";
import type { Formation, Shape } from "../../core/show/index.ts";
import { ChoiceField, NumberField, TextField } from "../fields/Field.tsx";
import { PointFields } from "../fields/PointFields.tsx";
import { useStudio, useStudioState } from "../studio-context.ts";
import { useLookInto } from "../use-look-into.ts";
import { Remedies } from "./Remedies.tsx";
import { sayFormationTrouble } from "./say-trouble.ts";
import { shapeNumbers } from "./shape-fields.ts";

const STYLES = [
	{ value: "outline", name: "outline" },
	{ value: "filled", name: "filled" },
] as const;

/** Shape, place and name of one formation. */
export function FormationFields({ formation }: { formation: Formation }) {
	const { commands } = useStudio();
	const readOnly = useStudioState((state) => state.readOnly !== null);
	const limits = useStudioState((state) => state.show?.fleet.limits ?? null);
	const used = useStudioState(
		(state) =>
			state.show?.cues.order.filter((id) => {
				const cue = state.show?.cues.byId[id];
				return cue?.kind === "transition" && cue.formation === formation.id;
			}).length ?? 0,
	);
	const verdict = useStudioState((state) => state.check?.formations.find((one) => one.id === formation.id) ?? null);
	const failing = verdict !== null && !verdict.verdicts.includes("flies");
	const inquired = useLookInto("formation", failing ? formation.id : null);
	const show = useStudioState((state) => state.show);
	const top = useRef<HTMLElement>(null);
	// Who comes here to mend it sees at once what would.
	useEffect(() => {
		if (failing) top.current?.scrollIntoView({ block: "start" });
	}, [failing]);
	const { shape, place } = formation;
	const set = (next: Shape) => commands.changeFormation(formation.id, { shape: next });
	return (
		<section ref={top} className="formation-fields" aria-label={`Formation ${formation.name || formation.id}`}>
			<h3>{formation.name || formation.id}</h3>
			{failing && show && (
				<>
					<p className="trouble">The fleet can't stand here: {sayFormationTrouble(verdict, show)}</p>
					<Remedies own={[]} inquired={inquired} />
				</>
			)}
			<div className="fields">
				<TextField
					label="name"
					value={formation.name}
					disabled={readOnly}
					onSet={(name) => commands.changeFormation(formation.id, { name })}
				/>
				{shape.kind === "text" && (
					<TextField label="text" value={shape.text} disabled={readOnly} onSet={(text) => set({ ...shape, text })} />
				)}
				{(shape.kind === "text" || shape.kind === "drawing") && (
					<ChoiceField
						label="slots along"
						value={shape.style}
						choices={STYLES}
						disabled={readOnly}
						onSet={(style) => set({ ...shape, style })}
					/>
				)}
				{shapeNumbers(shape).map((field) => (
					<NumberField
						key={field.key}
						label={field.label}
						step={field.step}
						value={field.value}
						disabled={readOnly}
						onSet={(value) => set({ ...shape, [field.key]: value } as Shape)}
					/>
				))}
				<PointFields
					value={place.position}
					disabled={readOnly}
					onSet={(position) => commands.changeFormation(formation.id, { place: { ...place, position } })}
				/>
				<NumberField
					label="turn"
					unit="°"
					step={5}
					value={place.turn}
					disabled={readOnly}
					onSet={(turn) => commands.changeFormation(formation.id, { place: { ...place, turn } })}
				/>
				<NumberField
					label="tilt"
					unit="°"
					step={5}
					value={place.tilt}
					disabled={readOnly}
					onSet={(tilt) => commands.changeFormation(formation.id, { place: { ...place, tilt } })}
				/>
				<NumberField
					label="scale"
					step={0.05}
					value={place.scale}
					disabled={readOnly}
					onSet={(scale) => commands.changeFormation(formation.id, { place: { ...place, scale } })}
				/>
			</div>
			<div className="buttons">
				<button
					type="button"
					disabled={readOnly || limits === null}
					onClick={() => limits && set(sizeToSpacing(shape, limits, 1.1 / place.scale, place.tilt))}
				>
					Size to spacing
				</button>
				<button type="button" disabled={readOnly} onClick={() => commands.copyFormation(formation.id)}>
					Copy
				</button>
				<button
					type="button"
					disabled={readOnly || used > 0}
					title={used > 0 ? `${used} transitions go there` : undefined}
					onClick={() => commands.removeFormation(formation.id)}
				>
					Remove
				</button>
			</div>
		</section>
	);
}
