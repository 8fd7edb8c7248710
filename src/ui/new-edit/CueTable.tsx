import { useMemo, useState } from "react";
import type { NewEdit } from "../../app/index.ts";
import { type CueMove, describeShift } from "../../core/retime/index.ts";
import { createBeatMap, type Show } from "../../core/show/index.ts";
import { sayTime, writePlace } from "../say-place.ts";
import { useStudio } from "../studio-context.ts";

type Filter = "all" | "review" | "orphan" | "again";

const FILTERS: readonly { readonly id: Filter; readonly name: string }[] = [
	{ id: "all", name: "all" },
	{ id: "review", name: "to review" },
	{ id: "orphan", name: "to the tray" },
	{ id: "again", name: "heard again" },
];

/** Every cue with its old and new place, and what the designer decides about it. */
export function CueTable(props: { show: Show; edit: NewEdit; chosen: string | null; choose: (id: string) => void }) {
	const { show, edit, chosen, choose } = props;
	const { result, choices } = edit;
	const open = result.cues.filter((one) => one.status === "review" && !choices.looked.has(one.id)).length;
	const [filter, setFilter] = useState<Filter>(open > 0 ? "review" : "all");
	const counts: Record<Filter, number> = {
		all: result.cues.length,
		review: result.cues.filter((one) => one.status === "review").length,
		orphan: result.cues.filter((one) => one.status === "orphan" || choices.tray.has(one.id)).length,
		again: result.offers.length,
	};
	const rows = result.cues.filter((one) => {
		if (filter === "review") return one.status === "review";
		return filter === "all" || one.status === "orphan" || choices.tray.has(one.id);
	});
	return (
		<section className="cue-table" aria-label="Cues">
			<fieldset className="filter">
				<legend className="unseen">Which cues are shown</legend>
				{FILTERS.filter(({ id }) => id === "all" || counts[id] > 0).map(({ id, name }) => (
					<label key={id}>
						<input type="radio" name="edit-cues" checked={filter === id} onChange={() => setFilter(id)} />
						{name} <span className="quiet">{counts[id]}</span>
					</label>
				))}
			</fieldset>
			{filter === "again" ? (
				<Offers show={show} edit={edit} />
			) : (
				<table>
					<thead>
						<tr>
							<th scope="col">cue</th>
							<th scope="col">what</th>
							<th scope="col">old place</th>
							<th scope="col">new place</th>
							<th scope="col">moved</th>
							<th scope="col">status</th>
							<th scope="col" className="unseen">
								decide
							</th>
						</tr>
					</thead>
					<tbody>
						{rows.map((move) => (
							<Row key={move.id} move={move} show={show} edit={edit} chosen={move.id === chosen} choose={choose} />
						))}
					</tbody>
				</table>
			)}
			{filter !== "again" && rows.length === 0 && <p className="quiet">None of this kind.</p>}
		</section>
	);
}

function Row(props: { move: CueMove; show: Show; edit: NewEdit; chosen: boolean; choose: (id: string) => void }) {
	const { move, show, edit, chosen, choose } = props;
	const { commands } = useStudio();
	const { choices } = edit;
	const old = useMemo(() => createBeatMap(show.grid), [show.grid]);
	const current = useMemo(() => createBeatMap(edit.result.show.grid), [edit.result.show.grid]);
	const inTray = choices.tray.has(move.id);
	const looked = choices.looked.has(move.id);
	const status = inTray || move.status === "orphan" ? "tray" : move.status === "review" && !looked ? "review" : "moved";
	const flip = (key: "looked" | "tray") => {
		const next = new Set(choices[key]);
		if (!next.delete(move.id)) next.add(move.id);
		commands.chooseInEdit({ [key]: next });
	};
	return (
		<tr className={chosen ? "chosen" : ""} aria-selected={chosen}>
			<td>
				<button
					type="button"
					className="plain number"
					onClick={() => choose(move.id)}
					aria-label={`Cue ${move.number}: go there`}
				>
					{move.number}
				</button>
			</td>
			<td>{show.cues.byId[move.id]?.name || sayKind(show, move)}</td>
			<td className="tabular">
				{writePlace(move.oldPosition, old)} <span className="quiet">{sayTime(move.oldTime)}</span>
			</td>
			<td className="tabular">
				{move.newPosition === null || inTray ? (
					<span className="quiet">–</span>
				) : (
					<>
						{writePlace(move.newPosition, current)} <span className="quiet">{sayTime(move.newTime ?? 0)}</span>
					</>
				)}
			</td>
			<td className="tabular">{move.newTime === null ? "" : describeShift(move.oldTime, move.newTime)}</td>
			<td>
				<span className={`mark ${status}`} aria-hidden="true" />
				{status === "tray" ? "to the tray" : status === "review" ? "to review" : looked ? "looked at" : "moved"}
				{(move.status !== "moved" || inTray) && <span className="small quiet reason">{move.reason}</span>}
			</td>
			<td className="decide">
				{move.status === "review" && !inTray && (
					<button type="button" className="plain small" aria-pressed={looked} onClick={() => flip("looked")}>
						{looked ? "Looked at" : "Right so"}
					</button>
				)}
				{move.status !== "orphan" && (
					<button type="button" className="plain small" aria-pressed={inTray} onClick={() => flip("tray")}>
						{inTray ? "Keep in the show" : "To the tray"}
					</button>
				)}
			</td>
		</tr>
	);
}

function sayKind(show: Show, { id, kind }: CueMove): string {
	const cue = show.cues.byId[id];
	if (cue?.kind === "transition") return `to ${show.formations.byId[cue.formation]?.name || cue.formation}`;
	return kind;
}

/** Cues whose music is heard a second time. */
function Offers({ show, edit }: { show: Show; edit: NewEdit }) {
	const { commands } = useStudio();
	const { offers } = edit.result;
	const { offers: taken } = edit.choices;
	const current = useMemo(() => createBeatMap(edit.result.show.grid), [edit.result.show.grid]);
	const set = (next: Iterable<number>) => commands.chooseInEdit({ offers: new Set(next) });
	return (
		<>
			<p>
				This music is heard again in the new soundtrack. Its cues can be taken up for the second time too.{" "}
				<button
					type="button"
					className="plain"
					onClick={() => set(taken.size === offers.length ? [] : offers.map((_, index) => index))}
				>
					{taken.size === offers.length ? "Take none" : "Take all"}
				</button>
			</p>
			<ul className="offers">
				{offers.map((offer, index) => (
					// biome-ignore lint/suspicious/noArrayIndexKey: an offer is its place in the list
					<li key={index}>
						<label>
							<input
								type="checkbox"
								checked={taken.has(index)}
								onChange={() => {
									const next = new Set(taken);
									if (!next.delete(index)) next.add(index);
									set(next);
								}}
							/>
							cue {show.cues.byId[offer.of]?.number ?? ""} again at{" "}
							{writePlace(current.positionAt(offer.time), current)} <span className="quiet">{sayTime(offer.time)}</span>
						</label>
					</li>
				))}
			</ul>
		</>
	);
}
