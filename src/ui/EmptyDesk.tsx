import { useStudio, useStudioState } from "./studio-context.ts";
import { Jobs } from "./TransportBar.tsx";

/** Nothing is open: what to do first. */
export function EmptyDesk({ choose }: { choose: () => void }) {
	const { commands } = useStudio();
	const previous = useStudioState((state) => state.previous);
	return (
		<div className="empty">
			<h1>Begin with the music</h1>
			<p>
				Open the client's soundtrack, or drop it anywhere here. Starstave finds its beats and sections and makes a rough
				cut that your fleet can fly. The music stays on this machine.
			</p>
			<div className="buttons">
				<button type="button" className="first" onClick={choose}>
					Open a soundtrack or a show …
				</button>
				<button type="button" onClick={() => void commands.openDemo()}>
					Open the demo show
				</button>
				{previous !== null && (
					<button type="button" onClick={() => void commands.bringBackPrevious()}>
						Bring back {previous || "the last show"}
					</button>
				)}
			</div>
			<Jobs />
		</div>
	);
}
