import { memo, useCallback, useEffect, useRef, useState } from "react";
import type { TransitionCheck, Verdict } from "../../core/flight/index.ts";
import type { Show } from "../../core/show/index.ts";
import { worstVerdict } from "../../staves/index.ts";
import { desk } from "../desk.ts";
import { sayBeats, sayPlace, saySeconds } from "../say-place.ts";
import { useStudio, useStudioState } from "../studio-context.ts";
import { tightestMoment } from "../tightest-moment.ts";
import { useBeatMap } from "../use-frame.ts";
import { LegLook } from "./LegLook.tsx";
import { Cautions } from "./Margin.tsx";
import { sayFormationTrouble } from "./say-trouble.ts";
import { VerdictMark } from "./VerdictMark.tsx";

/** Rows that are drawn at a time: the rest comes when it is scrolled to. */
const PAGE = 20;

type Filter = "all" | "trouble" | "tight";

/**
 * Feasibility of the whole show: every leg, worst first, needed against available time as a picture. One of them is open
 * at a time: its figures over time, and what would make it fly, with its tightest moment in the night view.
 */
export function Verdicts() {
	const [filter, setFilter] = useState<Filter>("all");
	const { commands, store } = useStudio();
	const check = useStudioState((state) => state.check);
	const unchecked = useStudioState((state) => state.unchecked);
	const show = useStudioState((state) => state.show);
	const selection = useStudioState((state) => state.selection);
	const [open, setOpen] = useState<string | null>(
		selection.kind === "cues" && selection.ids.length === 1 ? selection.ids[0] : null,
	);
	const [shown, setShown] = useState(PAGE);
	const toggle = useCallback(
		(one: TransitionCheck) => {
			const state = store.getState();
			setOpen((before) => (before === one.id ? null : one.id));
			if (state.show?.cues.byId[one.id]) commands.select({ kind: "cues", ids: [one.id] });
			else commands.select({ kind: "nothing" });
			if (state.flight && state.show) commands.seek(tightestMoment(one, state.flight, state.show.fleet.limits));
		},
		[commands, store],
	);
	if (!check || !show) {
		const waits = (show?.formations.order.length ?? 0) > 0;
		return (
			<p className="quiet" role="status">
				{waits
					? "The show is being planned and checked: its verdicts stand here when that is done."
					: "Nothing has been checked yet: a show with two formations and a transition has something to check."}
			</p>
		);
	}
	const legs = [check.launch, ...check.transitions, check.landing].filter(
		(one): one is TransitionCheck => one !== null,
	);
	const chosen = legs
		.filter((one) => filter === "all" || (filter === "trouble" ? fails(one) : one.verdicts.includes("tight")))
		.sort((a, b) => share(b) - share(a));
	const bad = legs.filter(fails).length;
	const over = check.endurance.airborne > check.endurance.limit;
	return (
		<>
			<h2>
				{check.flies
					? "Every part of the plan flies"
					: bad > 0
						? `${bad} of ${legs.length} do not fly`
						: "The show does not fly as it stands"}
			</h2>
			<p>
				In the air for {saySeconds(check.endurance.airborne)}; endurance less reserve is{" "}
				{saySeconds(check.endurance.limit)}
				{over ? <strong className="trouble">: too long.</strong> : "."}
			</p>
			<FormationTrouble />
			<fieldset className="filter">
				<legend className="unseen">Which are shown</legend>
				{(["all", "trouble", "tight"] as const).map((one) => (
					<label key={one}>
						<input type="radio" name="verdicts" checked={filter === one} onChange={() => setFilter(one)} />
						{one === "all" ? "all" : one === "trouble" ? "do not fly" : "tight"}
					</label>
				))}
			</fieldset>
			{chosen.length === 0 && <p className="quiet">None of this kind.</p>}
			<ul className="verdicts">
				{chosen.slice(0, shown).map((one) => (
					<li key={one.id}>
						<Row
							check={one}
							name={legName(one, show)}
							waiting={unchecked.has(one.id)}
							open={one.id === open}
							onToggle={toggle}
						/>
						{one.id === open && <LegLook check={one} show={show} waiting={unchecked.has(one.id)} />}
					</li>
				))}
			</ul>
			{chosen.length > shown && <More rest={chosen.length - shown} onMore={() => setShown(shown + PAGE)} />}
			<Cautions />
		</>
	);
}

/** More rows, when it comes into view or is pressed. */
function More({ rest, onMore }: { rest: number; onMore: () => void }) {
	const button = useRef<HTMLButtonElement>(null);
	useEffect(() => {
		const watch = new IntersectionObserver((entries) => entries.some((one) => one.isIntersecting) && onMore());
		if (button.current) watch.observe(button.current);
		return () => watch.disconnect();
	}, [onMore]);
	return (
		<button ref={button} type="button" className="plain small quiet" onClick={onMore}>
			{rest} more …
		</button>
	);
}

/** Formations in which the fleet can't stand, with the way to their remedies. */
function FormationTrouble() {
	const { commands } = useStudio();
	const check = useStudioState((state) => state.check);
	const show = useStudioState((state) => state.show);
	if (!check || !show) return null;
	return check.formations
		.filter((one) => !one.verdicts.includes("flies"))
		.map((one) => (
			<p key={one.id} className="trouble">
				Formation {show.formations.byId[one.id]?.name || one.id}: {sayFormationTrouble(one, show)}{" "}
				<button
					type="button"
					className="small"
					aria-label={`What would mend it: ${show.formations.byId[one.id]?.name || one.id}`}
					onClick={() => {
						commands.select({ kind: "formation", id: one.id });
						desk.setState({ margin: "formations" });
					}}
				>
					What would mend it
				</button>
			</p>
		));
}

function legName(one: TransitionCheck, show: Show): string {
	const cue = show.cues.byId[one.id];
	if (cue) return `Cue ${cue.number} · to ${show.formations.byId[one.to]?.name || one.to}`;
	return one.id === "launch" ? "Launch" : "Landing";
}

const fails = (one: TransitionCheck): boolean => !one.verdicts.includes("flies");

/** Needed time over available time: what the list is sorted by. */
function share(check: TransitionCheck): number {
	const spatial: readonly Verdict[] = ["too-close", "out-of-venue"];
	if (check.needed === null || spatial.some((verdict) => check.verdicts.includes(verdict)))
		return Number.POSITIVE_INFINITY;
	return check.needed / Math.max(1e-6, check.available);
}

interface RowProps {
	readonly check: TransitionCheck;
	readonly name: string;
	readonly waiting: boolean;
	readonly open: boolean;
	readonly onToggle: (check: TransitionCheck) => void;
}

const Row = memo(function Row({ check, name, waiting, open, onToggle }: RowProps) {
	return (
		<button type="button" className="plain verdict-row" aria-expanded={open} onClick={() => onToggle(check)}>
			<VerdictMark verdict={waiting ? null : worstVerdict(check.verdicts)} />
			<span>{name}</span>
			<TimeBeam check={check} />
			<Short check={check} />
		</button>
	);
});

/** Where the time that a leg has ends, on a beam 100 wide: the same for all, so that the fills can be compared. */
const END = 72;

/** A beam as on the staves: outline = the time it has, fill = the time it needs; what doesn't fit runs on as an arrow. */
function TimeBeam({ check }: { check: TransitionCheck }) {
	const taken = check.needed === null ? null : check.needed / Math.max(1e-6, check.available);
	const over = taken === null || taken > 1 + 1e-6;
	const tip = taken === null ? 98 : Math.min(98, Math.max(END + 6, END * taken));
	return (
		<svg className="time-beam" viewBox="0 0 100 12" preserveAspectRatio="none" aria-hidden="true">
			<rect className={over ? "fill bad" : "fill"} x="0" y="2" height="8" width={over ? END : END * taken} />
			<rect className="outline" x="0.5" y="1" height="10" width={END} />
			{over && <path className="arrow" d={`M${END} 2H${tip - 4}L${tip} 6L${tip - 4} 10H${END}`} />}
		</svg>
	);
}

function Short({ check }: { check: TransitionCheck }) {
	const beatMap = useBeatMap();
	if (check.needed === null) return <span className="small trouble">no time is enough</span>;
	if (check.slackBeats !== null && check.slackBeats < 0)
		return <span className="small trouble">{sayBeats(-check.slackBeats)} short</span>;
	const where = check.departs.beat === null ? saySeconds(check.available) : sayPlace(check.departs.beat, beatMap);
	return <span className="small quiet">{where}</span>;
}
