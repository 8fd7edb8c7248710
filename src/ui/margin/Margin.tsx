import { useEffect, useRef } from "react";
import { useStore } from "zustand";
import { desk, type MarginPage } from "../desk.ts";
import { useStudioState } from "../studio-context.ts";
import { Care } from "./Care.tsx";
import { Detail } from "./Detail.tsx";
import { FleetVenue } from "./FleetVenue.tsx";
import { Formations } from "./Formations.tsx";
import { HandOff } from "./HandOff.tsx";
import { Tray } from "./Tray.tsx";
import { Verdicts } from "./Verdicts.tsx";

const PAGES: readonly { readonly page: MarginPage; readonly name: string }[] = [
	{ page: "detail", name: "Detail" },
	{ page: "verdicts", name: "Verdicts" },
	{ page: "care", name: "Care" },
	{ page: "formations", name: "Formations" },
	{ page: "fleet-venue", name: "Fleet & venue" },
	{ page: "hand-off", name: "Hand-off" },
	{ page: "tray", name: "Tray" },
];

/** The note in the margin: what is selected, or one of the pages about the whole show. */
export function Margin() {
	const page = useStore(desk, (state) => state.margin);
	const aside = useRef<HTMLElement>(null);
	// Another page is read from its head.
	// biome-ignore lint/correctness/useExhaustiveDependencies: the page is what it follows
	useEffect(() => {
		aside.current?.scrollTo(0, 0);
	}, [page]);
	const hasShow = useStudioState((state) => state.show !== null);
	if (!hasShow) {
		return (
			<aside className="margin" aria-label="Margin">
				<Cautions />
			</aside>
		);
	}
	return (
		<aside ref={aside} className="margin" aria-label="Margin">
			<nav className="margin-pages" aria-label="Pages of the margin">
				{PAGES.map((one) => (
					<button
						key={one.page}
						type="button"
						className="plain"
						aria-current={one.page === page ? "page" : undefined}
						onClick={() => desk.setState({ margin: one.page })}
					>
						{one.name}
					</button>
				))}
			</nav>
			<div className="note">
				{page === "detail" && <Detail />}
				{page === "verdicts" && <Verdicts />}
				{page === "care" && <Care />}
				{page === "formations" && <Formations />}
				{page === "fleet-venue" && <FleetVenue />}
				{page === "hand-off" && <HandOff />}
				{page === "tray" && <Tray />}
			</div>
		</aside>
	);
}

/** What no screen of this program decides. */
export function Cautions() {
	return (
		<p className="quiet small">
			Starstave advises. Its proof covers the plan, not the air: spacing has to include position error, tracking and
			wind. Go or no-go is the flight director's; local codes and licensed practice come first.
		</p>
	);
}
