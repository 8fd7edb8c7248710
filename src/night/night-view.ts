import "pixi.js/unsafe-eval";
import { Container, WebGLRenderer } from "pixi.js";
import type { Box, Venue } from "../core/show/index.ts";
import { aimCamera, type Camera, type NightViewpoint, type Orbit } from "./camera.ts";
import { DroneLights } from "./drone-lights.ts";
import { drawMarks, type NightMarks } from "./marks.ts";
import { SkyLines } from "./sky-lines.ts";

/** What is in the sky at one instant. The arrays stay the caller's; they are read, not kept. */
export interface NightFrame {
	/** 3·N metres, show frame. */
	readonly positions: Float32Array;
	/** 3·N sRGB bytes; 0 0 0 is unlit. */
	readonly colours: Uint8Array;
	readonly marks: NightMarks;
	/** Unlit drones are drawn faint. */
	readonly showUnlit: boolean;
}

/** The preview. Draws the frame that it is given, when it is given; it has no clock. */
export interface NightView {
	draw(frame: NightFrame): void;
	/** @param extent what should be in the picture, m */
	setVenue(venue: Venue, extent: Box): void;
	setViewpoint(viewpoint: NightViewpoint): void;
	/** Turns the free view, radians and a factor on the distance. */
	orbit(turn: number, lift: number, zoom: number): void;
	resize(): void;
	/** Milliseconds of script that the last frame took. */
	readonly cost: number;
	destroy(): void;
}

const NIGHT = 0x070b18;

/**
 * Puts a WebGL canvas and an overlay for marks into `host`.
 * @throws when the browser gives no WebGL 2 context
 */
export async function createNightView(host: HTMLElement): Promise<NightView> {
	const renderer = new WebGLRenderer();
	const canvas = document.createElement("canvas");
	const overlay = document.createElement("canvas");
	overlay.className = "night-marks";
	canvas.className = "night-sky";
	const ratio = Math.min(2, window.devicePixelRatio || 1);
	await renderer.init({
		canvas,
		width: Math.max(1, host.clientWidth),
		height: Math.max(1, host.clientHeight),
		resolution: ratio,
		autoDensity: false,
		backgroundColor: NIGHT,
		antialias: false,
		preferWebGLVersion: 2,
	});
	host.append(canvas, overlay);
	const stage = new Container();
	const lines = new SkyLines();
	const lights = new DroneLights();
	stage.addChild(lines.mesh, lights.mesh);
	const pen = overlay.getContext("2d");

	let viewpoint: NightViewpoint = "audience";
	let extent: Box = { min: [-40, 0, 0], max: [40, 40, 80] };
	let seat: readonly [number, number, number] = [0, -60, 1.6];
	const orbit: Orbit = { turn: 0.5, lift: 0.35, distance: 160 };
	let camera: Camera | null = null;
	let last: NightFrame | null = null;
	let cost = 0;

	const size = () => ({ width: Math.max(1, host.clientWidth), height: Math.max(1, host.clientHeight) });
	const aim = () => {
		const { width, height } = size();
		camera = aimCamera({ viewpoint, aspect: width / height, extent, seat, orbit });
		lights.aim(camera, height * ratio);
		lines.aim(camera);
	};
	const resize = () => {
		const { width, height } = size();
		renderer.resize(width, height, ratio);
		overlay.width = Math.round(width * ratio);
		overlay.height = Math.round(height * ratio);
		camera = null;
		if (last) draw(last);
	};
	const draw = (frame: NightFrame) => {
		const begun = performance.now();
		last = frame;
		if (!camera) aim();
		lights.write(frame.positions, frame.colours, frame.showUnlit);
		renderer.render({ container: stage });
		if (pen && camera) drawMarks(pen, camera, frame.positions, frame.marks, overlay.width, overlay.height, ratio);
		cost = performance.now() - begun;
	};
	resize();

	return {
		draw,
		resize,
		get cost() {
			return cost;
		},
		setVenue(venue, wanted) {
			extent = wanted;
			seat = venue.seat;
			const [dx, dy, dz] = [0, 1, 2].map((i) => wanted.max[i]! - wanted.min[i]!) as [number, number, number];
			orbit.distance = Math.max(20, Math.hypot(dx, dy, dz) * 0.85);
			lines.write(venue, wanted);
			camera = null;
			if (last) draw(last);
		},
		setViewpoint(wanted) {
			viewpoint = wanted;
			camera = null;
			if (last) draw(last);
		},
		orbit(turn, lift, zoom) {
			orbit.turn += turn;
			orbit.lift = Math.min(1.5, Math.max(-0.2, orbit.lift + lift));
			orbit.distance = Math.min(2000, Math.max(5, orbit.distance * zoom));
			camera = null;
			if (last) draw(last);
		},
		destroy() {
			lights.destroy();
			lines.destroy();
			stage.destroy();
			renderer.destroy();
			canvas.remove();
			overlay.remove();
		},
	};
}
