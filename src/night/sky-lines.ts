import { Buffer, BufferUsage, Geometry, GlProgram, Mesh, Shader, UniformGroup } from "pixi.js";
import type { Box, Venue } from "../core/show/index.ts";
import { type Camera, cornersOf } from "./camera.ts";

const vertex = `#version 300 es
precision highp float;
in vec3 aPosition;
in vec4 aColour;
uniform mat4 uView;
out vec4 vColour;
void main() {
	gl_Position = uView * vec4(aPosition, 1.0);
	vColour = aColour;
}`;
const fragment = `#version 300 es
precision highp float;
in vec4 vColour;
out vec4 finalColor;
void main() { finalColor = vec4(vColour.rgb * vColour.a, vColour.a); }`;

type Ink = readonly [number, number, number, number];
const GRID: Ink = [0x2a, 0x35, 0x57, 110];
const VOLUME: Ink = [0x3b, 0x49, 0x72, 150];
const BLOCKED: Ink = [0xff, 0x6a, 0x4d, 150];
const AUDIENCE: Ink = [0xa9, 0xa6, 0x93, 220];

/** Ground grid, flight volume, blocked volumes and the audience line, as one list of lines. */
export class SkyLines {
	readonly mesh: Mesh<Geometry, Shader>;
	private readonly buffer: Buffer;
	private readonly uniforms: UniformGroup;

	constructor() {
		this.uniforms = new UniformGroup({ uView: { value: new Float32Array(16), type: "mat4x4<f32>" } });
		this.buffer = new Buffer({ data: new Float32Array(8), usage: BufferUsage.VERTEX | BufferUsage.COPY_DST });
		const geometry = new Geometry({
			topology: "line-list",
			attributes: {
				aPosition: { buffer: this.buffer, format: "float32x3", stride: 16, offset: 0 },
				aColour: { buffer: this.buffer, format: "unorm8x4", stride: 16, offset: 12 },
			},
		});
		const shader = new Shader({
			glProgram: GlProgram.from({ vertex, fragment, name: "sky-lines" }),
			resources: { camera: this.uniforms },
		});
		this.mesh = new Mesh({ geometry, shader });
		this.mesh.state.blend = true;
		this.mesh.state.depthTest = false;
		this.mesh.state.culling = false;
	}

	/** Lays the lines anew for a venue. */
	write(venue: Venue, extent: Box): void {
		const lines: number[] = [];
		const inks: Ink[] = [];
		const line = (a: readonly number[], b: readonly number[], ink: Ink) => {
			lines.push(a[0]!, a[1]!, a[2]!, b[0]!, b[1]!, b[2]!);
			inks.push(ink, ink);
		};
		const step = gridStep(extent);
		const snap = (value: number, up: boolean) => (up ? Math.ceil(value / step) : Math.floor(value / step)) * step;
		const [x0, x1] = [snap(Math.min(extent.min[0], -step) - 2 * step, false), snap(extent.max[0] + 2 * step, true)];
		const [y0, y1] = [snap(Math.min(extent.min[1], 0) - 2 * step, false), snap(extent.max[1] + 4 * step, true)];
		for (let x = x0; x <= x1 + 1e-6; x += step) line([x, y0, 0], [x, y1, 0], GRID);
		for (let y = y0; y <= y1 + 1e-6; y += step) line([x0, y, 0], [x1, y, 0], GRID);
		box(venue.volume, VOLUME, line);
		for (const blocked of venue.blocked) box(blocked, BLOCKED, line);
		if (venue.audience) {
			const { from, to } = venue.audience;
			line([from[0], from[1], 0], [to[0], to[1], 0], AUDIENCE);
		}
		const floats = new Float32Array((lines.length / 3) * 4);
		const bytes = new Uint8Array(floats.buffer);
		inks.forEach((ink, i) => {
			floats.set(lines.slice(3 * i, 3 * i + 3), 4 * i);
			bytes.set(ink, 16 * i + 12);
		});
		this.buffer.data = floats;
		this.buffer.update();
	}

	aim(camera: Camera): void {
		(this.uniforms.uniforms as { uView: Float32Array }).uView.set(camera.matrix);
		this.uniforms.update();
	}

	destroy(): void {
		this.mesh.destroy();
		this.buffer.destroy();
	}
}

/** Lines 5, 10, 20 or 50 m apart, so that a dozen or two are in the picture. */
function gridStep(extent: Box): number {
	const wide = extent.max[0] - extent.min[0];
	return [5, 10, 20, 50, 100].find((step) => wide / step < 16) ?? 200;
}

function box(volume: Box, ink: Ink, line: (a: readonly number[], b: readonly number[], ink: Ink) => void): void {
	const corners = cornersOf(volume);
	for (let a = 0; a < 8; a++) {
		for (const bit of [1, 2, 4]) {
			const b = a ^ bit;
			if (b > a) line(corners[a]!, corners[b]!, ink);
		}
	}
}
