import type { AfterEdit } from "../../app/index.ts";
import type { TransitionCheck } from "../../core/flight/index.ts";
import { find, type Show } from "../../core/show/index.ts";
import { desk } from "../desk.ts";
import { sayTime } from "../say-place.ts";
import { useStudio, useStudioState } from "../studio-context.ts";

/** What a retime left to be done: what no longer flies, what is to be reviewed, and the cues whose music is gone. */
export function Tray() {
	const show = useStudioState((state) => state.show);
	const after = useStudioState((state) => state.afterEdit);
	const check = useStudioState((state) => state.check);
	const unchecked = useStudioState((state) => state.unchecked);
	if (show === null) return null;
	const waiting = show.orphans ?? [];
	const review = show.review ?? [];
	const broken =
		after === null
			? []
			: (check?.transitions ?? []).filter(
					(one) => after.flewBefore.has(one.id) && !unchecked.has(one.id) && !one.verdicts.includes("flies"),
				);
	return (
		<>
			<h2>{after === null ? "Tray" : "After the new edit"}</h2>
			{after !== null && <Receipt after={after} broken={broken} pending={unchecked.size > 0} show={show} />}
			{review.length > 0 && <Review show={show} />}
			<h3>Cues in the tray</h3>
			{waiting.length === 0 ? (
				<p className="quiet">
					Nothing waits here. Cues whose music a new edit no longer has are kept in the tray, and so are cues that you
					put there; they are saved with the show.
				</p>
			) : (
				<Waiting show={show} />
			)}
		</>
	);
}

function Receipt(props: { after: AfterEdit; broken: readonly TransitionCheck[]; pending: boolean; show: Show }) {
	const { after, broken, pending, show } = props;
	const { commands } = useStudio();
	const { transitions, gone, launch, landing } = after.receipt;
	const same = transitions.filter((one) => one.status === "same" || one.status === "dilated");
	const fresh = transitions.filter((one) => one.status !== "same" && one.status !== "dilated");
	const go = (id: string) => {
		commands.goToCue(id);
		desk.setState({ margin: "detail" });
	};
	return (
		<>
			{broken.length > 0 && (
				<>
					<p className="trouble">
						{broken.length === 1 ? "One transition" : `${broken.length} transitions`} flew before and{" "}
						{broken.length === 1 ? "does" : "do"} not now. Each has its remedies under Detail.
					</p>
					<ul className="tray-list">
						{broken.map((one) => (
							<li key={one.id}>
								<button type="button" className="plain" onClick={() => go(one.id)}>
									Cue {find(show.cues, one.id)?.number ?? one.id}
								</button>
								<span className="quiet">
									{one.needed === null
										? "no time is enough"
										: `needs ${one.needed.toFixed(1)} s, has ${one.available.toFixed(1)} s`}
								</span>
							</li>
						))}
					</ul>
				</>
			)}
			{broken.length === 0 && (
				<p>{pending ? "Being checked." : "Everything that flew on the old soundtrack flies on this one."}</p>
			)}
			<p>
				{same.length} of {transitions.length} transitions keep the paths that they had on {after.from}, at most slower
				or faster: those that fly need no new rehearsal.{gone.length > 0 && ` ${gone.length} went with the music.`}
				{launch === "changed" && " The launch is another."}
				{landing === "changed" && " The landing is another."}
			</p>
			{fresh.length > 0 && (
				<ul className="tray-list">
					{fresh.map((one) => (
						<li key={one.cue}>
							<button type="button" className="plain" onClick={() => go(one.cue)}>
								Cue {find(show.cues, one.cue)?.number ?? one.cue}
							</button>
							<span className="quiet">{one.reason}</span>
						</li>
					))}
				</ul>
			)}
		</>
	);
}

function Review({ show }: { show: Show }) {
	const { commands } = useStudio();
	return (
		<>
			<h3>To review</h3>
			<ul className="tray-list">
				{(show.review ?? []).map(({ cue, reason }) => (
					<li key={cue}>
						<button
							type="button"
							className="plain"
							onClick={() => {
								commands.goToCue(cue);
								desk.setState({ margin: "detail" });
							}}
						>
							Cue {find(show.cues, cue)?.number ?? cue}
						</button>
						<span className="quiet">{reason}</span>
						<button type="button" className="small" onClick={() => commands.doneReviewing(cue)}>
							Right so
						</button>
						<button type="button" className="small" onClick={() => commands.putCueInTray(cue)}>
							To the tray
						</button>
					</li>
				))}
			</ul>
		</>
	);
}

function Waiting({ show }: { show: Show }) {
	const { commands } = useStudio();
	return (
		<ul className="tray-list">
			{(show.orphans ?? []).map(({ cue, time, soundtrack }, index) => (
				// biome-ignore lint/suspicious/noArrayIndexKey: a cue in the tray is its place there
				<li key={index}>
					<strong>Cue {cue.number}</strong>
					<span className="quiet">
						{cue.name ||
							(cue.kind === "transition"
								? `to ${find(show.formations, cue.formation)?.name || cue.formation}`
								: cue.kind)}
						, from {sayTime(time)} {soundtrack === show.soundtrack?.sha256 ? "of this soundtrack" : "of an earlier one"}
					</span>
					<button
						type="button"
						className="small"
						onClick={() => {
							const id = commands.putBackFromTray(index);
							if (id !== null) desk.setState({ margin: "detail" });
						}}
					>
						Put back at the playhead
					</button>
				</li>
			))}
		</ul>
	);
}
