import { useCallback, useRef } from "react";
import type { NewEdit } from "../../app/index.ts";
import { toNew, toOld } from "../../core/retime/index.ts";
import { useFrame } from "../use-frame.ts";
import type { Scale } from "./scale.ts";

/** Where the ear is in the soundtrack that is played, and the same place in the other. */
export function MapPlayhead(props: { edit: NewEdit; scale: Scale; wave: number; ruler: number; gap: number }) {
	const { edit, scale, wave, ruler, gap } = props;
	const line = useRef<SVGPathElement>(null);
	const follow = useCallback(
		(seconds: number) => {
			const hearsNew = edit.hears === "new";
			const a = scale.x(hearsNew ? toOld(edit.map, seconds) : seconds);
			const b = scale.x(hearsNew ? seconds : toNew(edit.map, seconds));
			const top = ruler + wave;
			const path = `M${a.toFixed(1)} ${ruler}V${top}L${b.toFixed(1)} ${top + gap}V${top + gap + wave}`;
			if (line.current && line.current.getAttribute("d") !== path) line.current.setAttribute("d", path);
		},
		[edit, scale, wave, ruler, gap],
	);
	useFrame(follow);
	return <path ref={line} className="map-playhead" />;
}
