import type { BeatMap } from "../../core/show/index.ts";
import { readPlace, writePlace } from "../say-place.ts";
import { SteppedField } from "./Field.tsx";

interface PlaceFieldProps {
	label: string;
	/** Beats. */
	value: number;
	beatMap: BeatMap;
	disabled?: boolean;
	onSet: (position: number) => boolean;
}

/** A place in the music as bar.beat: 33.1; arrow keys move it by a beat. */
export function PlaceField({ label, value, beatMap, disabled, onSet }: PlaceFieldProps) {
	return (
		<SteppedField
			label={label}
			value={writePlace(value, beatMap)}
			disabled={disabled}
			step={(text, direction) => {
				const position = readPlace(text, beatMap);
				return position === null ? text : writePlace(position + direction, beatMap);
			}}
			onSet={(text) => {
				const position = readPlace(text, beatMap);
				return position !== null && onSet(position);
			}}
		/>
	);
}
