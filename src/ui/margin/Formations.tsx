import { useRef } from "react";
import type { Shape } from "../../core/show/index.ts";
import { ChoiceField } from "../fields/Field.tsx";
import { useStudio, useStudioState } from "../studio-context.ts";
import { FormationFields } from "./FormationFields.tsx";
import { freshShape, SHAPE_KINDS } from "./shape-fields.ts";

/** The show's formations: a list with the selected one's fields. */
export function Formations() {
	const { commands } = useStudio();
	const file = useRef<HTMLInputElement>(null);
	const show = useStudioState((state) => state.show);
	const check = useStudioState((state) => state.check);
	const selection = useStudioState((state) => state.selection);
	const slots = useStudioState((state) => state.slots);
	const readOnly = useStudioState((state) => state.readOnly !== null);
	if (!show) return null;
	const chosen = selection.kind === "formation" ? show.formations.byId[selection.id] : undefined;
	const add = (kind: Shape["kind"]) => {
		const id = commands.addFormation(freshShape(kind, show.fleet, show.venue));
		if (id) commands.select({ kind: "formation", id });
	};
	return (
		<>
			<h2>Formations</h2>
			<div className="buttons">
				<select
					aria-label="Draw a new formation"
					value=""
					disabled={readOnly}
					className="adder"
					onChange={(event) => add(event.target.value as Shape["kind"])}
				>
					<option value="" disabled>
						New formation …
					</option>
					{SHAPE_KINDS.map((kind) => (
						<option key={kind.value} value={kind.value}>
							{kind.name}
						</option>
					))}
				</select>
				<button type="button" disabled={readOnly} onClick={() => file.current?.click()}>
					From an SVG or CSV file …
				</button>
				<input
					ref={file}
					type="file"
					className="unseen"
					tabIndex={-1}
					aria-label="Drawing as SVG, or points as CSV"
					accept=".svg,.csv,image/svg+xml,text/csv"
					onChange={async (event) => {
						const chosenFile = event.target.files?.[0];
						event.target.value = "";
						if (!chosenFile) return;
						const id = await commands.addFormationFrom(chosenFile);
						if (id) commands.select({ kind: "formation", id });
					}}
				/>
			</div>
			{show.formations.order.length === 0 ? (
				<p className="quiet">No formation yet: choose a shape, write a text, or take a drawing from a file.</p>
			) : (
				<ul className="formations">
					{show.formations.order.map((id) => {
						const formation = show.formations.byId[id];
						const verdict = check?.formations.find((one) => one.id === id);
						const bad = verdict && !verdict.verdicts.includes("flies");
						return (
							<li key={id}>
								<button
									type="button"
									className="plain"
									aria-pressed={chosen?.id === id}
									onClick={() => commands.select({ kind: "formation", id })}
								>
									<SlotsPicture
										positions={slots?.get(id)?.positions ?? null}
										colours={slots?.get(id)?.colours ?? null}
									/>
									<span>
										{formation.name || id}
										<span className={bad ? "small trouble" : "small quiet"}>
											{slots?.get(id)?.count ?? "?"} slots
											{verdict && Number.isFinite(verdict.gap) ? `, ${verdict.gap.toFixed(2)} m apart` : ""}
											{show.opening === id ? ", opening" : ""}
										</span>
									</span>
								</button>
							</li>
						);
					})}
				</ul>
			)}
			<ChoiceField
				label="the fleet waits in (opening)"
				value={show.opening ?? ""}
				disabled={readOnly}
				choices={[
					{ value: "", name: "no formation yet" },
					...show.formations.order.map((id) => ({ value: id, name: show.formations.byId[id].name || id })),
				]}
				onSet={(id) => commands.setOpening(id === "" ? null : id)}
			/>
			{chosen && <FormationFields key={chosen.id} formation={chosen} />}
		</>
	);
}

/** The slots as the audience sees them, small. */
function SlotsPicture({ positions, colours }: { positions: Float64Array | null; colours: Uint8Array | null }) {
	if (!positions) return <svg className="slots-picture" viewBox="0 0 40 30" aria-hidden="true" />;
	let [left, right, low, high] = [
		Number.POSITIVE_INFINITY,
		Number.NEGATIVE_INFINITY,
		Number.POSITIVE_INFINITY,
		Number.NEGATIVE_INFINITY,
	];
	const count = positions.length / 3;
	for (let i = 0; i < count; i++) {
		left = Math.min(left, positions[3 * i]);
		right = Math.max(right, positions[3 * i]);
		low = Math.min(low, positions[3 * i + 2]);
		high = Math.max(high, positions[3 * i + 2]);
	}
	const scale = Math.min(36 / Math.max(1, right - left), 26 / Math.max(1, high - low));
	const step = Math.max(1, Math.floor(count / 240));
	const dots = [];
	for (let i = 0; i < count; i += step) {
		const x = 20 + (positions[3 * i] - (left + right) / 2) * scale;
		const y = 15 - (positions[3 * i + 2] - (low + high) / 2) * scale;
		const fill = colours ? `rgb(${colours[3 * i]} ${colours[3 * i + 1]} ${colours[3 * i + 2]})` : "currentColor";
		dots.push(<circle key={i} cx={x} cy={y} r={0.8} fill={fill} />);
	}
	return (
		<svg className="slots-picture" viewBox="0 0 40 30" aria-hidden="true">
			{dots}
		</svg>
	);
}
