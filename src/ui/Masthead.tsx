import { ChevronDown } from "lucide-react";
import { useCallback, useRef } from "react";
import { Button, Header, Menu, MenuItem, MenuSection, MenuTrigger, Popover, Text } from "react-aria-components";
import type { Action } from "./actions.ts";
import { desk } from "./desk.ts";
import { sayPlace, sayTime } from "./say-place.ts";
import { useStudioState } from "./studio-context.ts";
import { useBeatMap, useFrame } from "./use-frame.ts";

const THEMES = ["Show", "Edit", "Music", "Cues", "View"] as const;

/** The title with the menu at it, where the ear is, and how many transitions fly. */
export function Masthead({ actions }: { actions: readonly Action[] }) {
	const title = useStudioState((state) => state.show?.title ?? null);
	const unsaved = useStudioState((state) => state.unsaved);
	const called = title || (title === null ? "Starstave" : "Untitled show");
	return (
		<header className="masthead">
			<MenuTrigger>
				<Button className="title plain" aria-label={`${called}: menu`}>
					{called}
					<ChevronDown aria-hidden />
				</Button>
				<Popover className="floating menu-box" placement="bottom start">
					<Menu
						className="menu"
						onAction={(id) => actions.find((action) => action.id === id)?.run()}
						disabledKeys={actions.filter((action) => !(action.available?.() ?? true)).map((action) => action.id)}
					>
						{THEMES.map((theme) => (
							<MenuSection key={theme}>
								<Header>{theme}</Header>
								{actions
									.filter((action) => action.theme === theme)
									.map((action) => (
										<MenuItem key={action.id} id={action.id} textValue={action.name}>
											<Text slot="label">{action.name}</Text>
											{action.keys && <kbd>{action.keys}</kbd>}
										</MenuItem>
									))}
							</MenuSection>
						))}
					</Menu>
				</Popover>
			</MenuTrigger>
			<Place />
			{unsaved && (
				<span className="quiet small apart" title="Kept in this browser; not in a file yet">
					not in a file yet
				</span>
			)}
		</header>
	);
}

/** Bar, beat and time under the ear; written into the page without drawing it anew. */
function Place() {
	const beatMap = useBeatMap();
	const hasShow = useStudioState((state) => state.show !== null);
	const place = useRef<HTMLElement>(null);
	const time = useRef<HTMLSpanElement>(null);
	const listener = useCallback(
		(seconds: number) => {
			const words = sayPlace(Math.floor(beatMap.positionAt(seconds) + 0.02), beatMap, " · ");
			if (place.current && place.current.textContent !== words) place.current.textContent = words;
			const clock = sayTime(seconds);
			if (time.current && time.current.textContent !== clock) time.current.textContent = clock;
		},
		[beatMap],
	);
	useFrame(listener);
	if (!hasShow) return null;
	return (
		<span className="place">
			<strong ref={place} />
			<span ref={time} className="quiet" />
		</span>
	);
}

/** "11 of 12 fly · 1 is too fast" */
export function Tally() {
	const check = useStudioState((state) => state.check);
	const unchecked = useStudioState((state) => state.unchecked);
	const count = useStudioState(
		(state) => state.show?.cues.order.filter((id) => state.show?.cues.byId[id].kind === "transition").length ?? 0,
	);
	if (count === 0) return null;
	const known = (check?.transitions ?? []).filter((transition) => !unchecked.has(transition.id));
	const fly = known.filter((transition) => transition.verdicts.includes("flies")).length;
	const fail = known.length - fly;
	const legs = [check?.launch, check?.landing].filter((leg) => leg && !leg.verdicts.includes("flies")).length;
	return (
		<span className="tally">
			<button type="button" className="plain" onClick={() => desk.setState({ margin: "verdicts" })}>
				<span className={fail + legs > 0 ? "" : "quiet"}>
					{fly} of {count} fly
				</span>
				{fail > 0 && <strong className="trouble">{fail === 1 ? "1 does not" : `${fail} do not`}</strong>}
				{legs > 0 && <strong className="trouble">launch or landing does not</strong>}
				{known.length < count && <span className="quiet">{count - known.length} being checked</span>}
			</button>
		</span>
	);
}
