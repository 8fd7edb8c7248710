import { useState } from "react";
import type { NewEdit } from "../../app/index.ts";
import { Field } from "../fields/Field.tsx";
import { useStudio } from "../studio-context.ts";

/** Two places that are the same in the music, by hand: minutes and seconds, or seconds. */
export function AnchorFields({ edit }: { edit: NewEdit }) {
	const { commands } = useStudio();
	const [old, setOld] = useState("");
	const [current, setCurrent] = useState("");
	const pair = { old: readTime(old), new: readTime(current) };
	const ready = pair.old !== null && pair.new !== null;
	const place = (value: string, set: (text: string) => void) => (id: string) => (
		<input
			id={id}
			value={value}
			placeholder="1:02.5"
			aria-invalid={value !== "" && readTime(value) === null}
			onChange={(event) => set(event.target.value)}
		/>
	);
	return (
		<form
			className="anchor-fields"
			onSubmit={(event) => {
				event.preventDefault();
				if (pair.old === null || pair.new === null) return;
				void commands.setEditAnchor({ old: pair.old, new: pair.new }).then((done) => {
					if (!done) return;
					setOld("");
					setCurrent("");
				});
			}}
		>
			<Field label="this place in the old">{place(old, setOld)}</Field>
			<Field label="is this place in the new">{place(current, setCurrent)}</Field>
			<button type="submit" disabled={!ready}>
				Pin the pair
			</button>
			<button
				type="button"
				className="plain"
				disabled={edit.corrections === 0}
				onClick={() => commands.takeBackCorrection()}
			>
				Take back the last correction
			</button>
		</form>
	);
}

/** "1:02.5" or "62.5" in seconds; null where it is neither. */
export function readTime(text: string): number | null {
	const match = /^\s*(?:(\d+):)?(\d+(?:[.,]\d+)?)\s*$/.exec(text);
	if (!match) return null;
	return 60 * Number(match[1] ?? 0) + Number(match[2].replace(",", "."));
}
