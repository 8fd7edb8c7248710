import { StrictMode } from "react";
import { createRoot } from "react-dom/client";
import type { Studio } from "../app/index.ts";
import { FrameLoop } from "./frame-loop.ts";
import { Spread } from "./Spread.tsx";
import { StudioContext } from "./studio-context.ts";
import "./styles/tokens.css";
import "./styles/page.css";
import "./styles/spread.css";
import "./styles/care.css";
import "./styles/new-edit.css";
import "./styles/margin.css";
import "./styles/floating.css";
import { FrameContext } from "./use-frame.ts";

/** Puts the screens into `root`. @returns takes them away again */
export function mountUi(root: HTMLElement, studio: Studio): () => void {
	const loop = new FrameLoop(studio);
	loop.start();
	const react = createRoot(root);
	react.render(
		<StrictMode>
			<StudioContext value={studio}>
				<FrameContext value={loop}>
					<Spread />
				</FrameContext>
			</StudioContext>
		</StrictMode>,
	);
	return () => {
		loop.stop();
		react.unmount();
	};
}
