import { useEffect } from "react";
import type { Inquired } from "../../app/index.ts";
import { bestFirst, type Remedy } from "../../core/flight/index.ts";
import { desk } from "../desk.ts";
import { useStudio, useStudioState } from "../studio-context.ts";

/**
 * What would make it fly, best first; each applied by one click. The one pointed at, or reached by key, is shown as a
 * ghost in the night view before it is applied.
 * @param own remedies that the check itself names
 * @param inquired what is found beside them, and whether more may come
 */
export function Remedies({ own, inquired }: { own: readonly Remedy[]; inquired: Inquired | null }) {
	const { commands } = useStudio();
	const readOnly = useStudioState((state) => state.readOnly !== null);
	const hide = () => desk.setState({ ghost: null });
	useEffect(() => () => desk.setState({ ghost: null }), []);
	const remedies = bestFirst([...own, ...(inquired?.remedies ?? [])]);
	const searching = inquired === null || inquired.searching;
	return (
		<section aria-label="What would make it fly">
			<h3>What would make it fly</h3>
			<ul className="remedies">
				{remedies.map((remedy) => {
					const show = () => desk.setState({ ghost: remedy.ghost });
					return (
						<li key={remedy.kind + remedy.change} onPointerEnter={show} onPointerLeave={hide}>
							<span>
								{remedy.change}
								<span className="quiet small">{remedy.cost}</span>
							</span>
							<button
								type="button"
								disabled={readOnly}
								aria-label={`Apply: ${remedy.change}`}
								onFocus={show}
								onBlur={hide}
								onClick={(event) => {
									// The list goes away with what it mends: the keys stay at the leg that was looked into.
									const row = event.currentTarget.closest(".leg-look")?.previousElementSibling;
									if (commands.applyRemedy(remedy) && row instanceof HTMLElement) row.focus();
								}}
							>
								Apply
							</button>
						</li>
					);
				})}
			</ul>
			<p className="quiet small" role="status">
				{searching
					? "Looking for more ways: each is planned and proven before it stands here."
					: remedies.length === 0
						? "Nothing was found that makes it fly and breaks nothing else. Give it more time, other formations, or a smaller fleet."
						: "Each has been planned and proven. Point at one to see its picture in the night view."}
			</p>
		</section>
	);
}
