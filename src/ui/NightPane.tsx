import { useCallback, useEffect, useRef, useState } from "react";
import { useStore } from "zustand";
import type { StudioState } from "../app/index.ts";
import { dronePositions } from "../core/flight/index.ts";
import { lightAt } from "../core/light/index.ts";
import { toOld } from "../core/retime/index.ts";
import type { Box } from "../core/show/index.ts";
import { createNightView, type NightView, type NightViewpoint } from "../night/index.ts";
import { desk } from "./desk.ts";
import { marksAt } from "./night-marks.ts";
import { useStudio, useStudioState } from "./studio-context.ts";
import { useFrame } from "./use-frame.ts";

const VIEWPOINTS: readonly NightViewpoint[] = ["audience", "plan", "elevation", "free"];

/** The sky at the instant that is heard. */
export function NightPane() {
	const studio = useStudio();
	const host = useRef<HTMLDivElement>(null);
	const view = useRef<NightView | null>(null);
	const [trouble, setTrouble] = useState<string | null>(null);
	const viewpoint = useStore(desk, (state) => state.viewpoint);
	const venue = useStudioState((state) => state.show?.venue ?? null);
	const slots = useStudioState((state) => state.slots);
	const looksDown = useStore(desk, (state) => state.viewpoint === "plan" && state.margin === "care");
	const care = useStudioState((state) => (looksDown ? state.care : null));
	const hasFlight = useStudioState((state) => state.flight !== null);
	const hasShow = useStudioState((state) => state.show !== null);
	const fresh = useRef(true);

	useEffect(() => {
		const element = host.current;
		if (!element) return;
		let gone = false;
		createNightView(element).then(
			(made) => {
				if (gone) return made.destroy();
				view.current = made;
				aim(made, { ...studio.store.getState(), care: null });
				made.setViewpoint(desk.getState().viewpoint);
				fresh.current = true;
			},
			() =>
				setTrouble(
					"This browser gives no WebGL 2, so the night view stays dark: open the show in a browser that does.",
				),
		);
		const sizes = new ResizeObserver(() => view.current?.resize());
		sizes.observe(element);
		const unsubscribe = studio.store.subscribe(() => {
			fresh.current = true;
		});
		const undesk = desk.subscribe(() => {
			fresh.current = true;
		});
		return () => {
			gone = true;
			sizes.disconnect();
			unsubscribe();
			undesk();
			view.current?.destroy();
			view.current = null;
		};
	}, [studio]);
	useEffect(() => {
		if (venue && view.current) aim(view.current, { ...studio.store.getState(), slots, care });
	}, [venue, slots, care, studio]);
	useEffect(() => view.current?.setViewpoint(viewpoint), [viewpoint]);

	const buffers = useRef({ positions: new Float32Array(0), colours: new Uint8Array(0) });
	const draw = useCallback(
		(heard: number, moved: boolean) => {
			if (!view.current || (!moved && !fresh.current)) return;
			fresh.current = false;
			const state = studio.store.getState();
			// While a new edit is held against the old one the sky is still the old show's.
			const seconds = state.newEdit?.hears === "new" ? toOld(state.newEdit.map, heard) : heard;
			const drones = state.flight?.drones ?? 0;
			if (buffers.current.positions.length !== 3 * drones) {
				buffers.current = { positions: new Float32Array(3 * drones), colours: new Uint8Array(3 * drones) };
			}
			const { positions, colours } = buffers.current;
			if (state.flight) dronePositions(state.flight, seconds, positions);
			if (state.light && state.flight) lightAt(state.light, seconds, colours);
			else colours.fill(0);
			view.current.draw({
				positions,
				colours,
				marks: { ...marksAt(state, seconds, positions, desk.getState().viewpoint), ghost: desk.getState().ghost },
				showUnlit: desk.getState().showUnlit,
			});
		},
		[studio],
	);
	useFrame(draw);

	return (
		<section className="sky" ref={host} aria-label="Night view" {...turning(view, () => (fresh.current = true))}>
			<div className="sky-views" role="toolbar" aria-label="Where the sky is seen from">
				{VIEWPOINTS.map((one) => (
					<button
						key={one}
						type="button"
						className="plain"
						aria-pressed={one === viewpoint}
						onClick={() => desk.setState({ viewpoint: one })}
					>
						{one}
					</button>
				))}
			</div>
			{trouble !== null && <p className="sky-words trouble">{trouble}</p>}
			{trouble === null && hasShow && !hasFlight && (
				<p className="sky-words">
					Nothing flies yet: the first transition or an opening formation puts drones into the sky.
				</p>
			)}
		</section>
	);
}

/** The free view is turned by dragging, and brought nearer by the wheel. */
function turning(view: { current: NightView | null }, changed: () => void) {
	let from: { x: number; y: number } | null = null;
	return {
		onPointerDown: (event: React.PointerEvent) => {
			if (desk.getState().viewpoint !== "free" || (event.target as Element).closest("button")) return;
			from = { x: event.clientX, y: event.clientY };
			event.currentTarget.setPointerCapture(event.pointerId);
		},
		onPointerMove: (event: React.PointerEvent) => {
			if (!from) return;
			view.current?.orbit((from.x - event.clientX) * 0.006, (event.clientY - from.y) * 0.006, 1);
			from = { x: event.clientX, y: event.clientY };
			changed();
		},
		onPointerUp: () => {
			from = null;
		},
		onWheel: (event: React.WheelEvent) => {
			if (desk.getState().viewpoint !== "free") return;
			view.current?.orbit(0, 0, Math.exp(event.deltaY * 0.001));
			changed();
		},
	};
}

function aim(view: NightView, state: StudioState): void {
	if (!state.show) return;
	view.setVenue(state.show.venue, withGround(extentOf(state), state));
}

/** Where the fall zone is looked at it is in the picture, with the audience line. */
function withGround({ min, max }: Box, { show, care }: StudioState): Box {
	if (!care?.fallZone || !show) return { min, max };
	const { audience } = show.venue;
	const corners = [...care.fallZone.outline, ...(audience ? [audience.from, audience.to] : [])];
	const [xs, ys] = [corners.map(([x]) => x), corners.map(([, y]) => y)];
	return {
		min: [Math.min(min[0], ...xs), Math.min(min[1], ...ys), min[2]],
		// Room for the label at the top, under the row of views.
		max: [Math.max(max[0], ...xs), Math.max(max[1], ...ys) + 12, max[2]],
	};
}

/** All slots of all formations, down to the ground; without any, the flight volume. */
function extentOf(state: StudioState): Box {
	const min: [number, number, number] = [Number.POSITIVE_INFINITY, Number.POSITIVE_INFINITY, 0];
	const max: [number, number, number] = [Number.NEGATIVE_INFINITY, Number.NEGATIVE_INFINITY, 0];
	for (const { positions, count } of state.slots?.values() ?? []) {
		for (let i = 0; i < 3 * count; i++) {
			const axis = i % 3;
			min[axis] = Math.min(min[axis], positions[i]);
			max[axis] = Math.max(max[axis], positions[i]);
		}
	}
	if (!Number.isFinite(min[0])) return state.show?.venue.volume ?? { min: [-40, 0, 0], max: [40, 40, 60] };
	return { min, max };
}
