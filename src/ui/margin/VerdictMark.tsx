import { useEffect, useRef } from "react";
import type { Verdict } from "../../core/flight/index.ts";
import { drawVerdict } from "../../staves/index.ts";

const WORDS: Record<Verdict, string> = {
	flies: "flies",
	tight: "tight",
	"too-fast": "too fast",
	"too-close": "too close",
	"out-of-venue": "out of venue",
};

export const sayVerdict = (verdict: Verdict | null): string => (verdict === null ? "not checked yet" : WORDS[verdict]);

/** The verdict's mark, drawn by the hand that draws it on the staves. */
export function VerdictMark({ verdict, words }: { verdict: Verdict | null; words?: boolean }) {
	const canvas = useRef<HTMLCanvasElement>(null);
	useEffect(() => {
		const pen = canvas.current?.getContext("2d");
		if (!canvas.current || !pen) return;
		const style = getComputedStyle(canvas.current);
		const token = (name: string) => style.getPropertyValue(`--${name}`).trim();
		pen.setTransform(2, 0, 0, 2, 0, 0);
		pen.clearRect(0, 0, 16, 16);
		drawVerdict(pen, verdict, 8, 8, { flight: token("flight"), trouble: token("trouble"), quiet: token("ink-quiet") });
	}, [verdict]);
	const bad = verdict !== null && verdict !== "flies" && verdict !== "tight";
	return (
		<span className={bad ? "verdict trouble" : "verdict"}>
			<canvas
				ref={canvas}
				width={32}
				height={32}
				className="verdict-mark"
				{...(words ? { "aria-hidden": true } : { role: "img", "aria-label": sayVerdict(verdict) })}
			/>
			{words && sayVerdict(verdict)}
		</span>
	);
}
