import { Buffer, BufferUsage, Geometry, GlProgram, Mesh, Shader, UniformGroup } from "pixi.js";
import type { Camera } from "./camera.ts";

const vertex = `#version 300 es
precision highp float;
in vec3 aPosition;
in vec4 aColour;
uniform mat4 uView;
uniform float uPixels;
uniform float uPerspective;
out vec4 vColour;
void main() {
	gl_Position = uView * vec4(aPosition, 1.0);
	float shrink = mix(1.0, 1.0 / max(gl_Position.w, 0.5), uPerspective);
	// A lamp's halo is two metres across; far away it never falls below what the eye can find.
	float size = clamp(uPixels * 2.2 * shrink, 11.0, 80.0);
	gl_PointSize = mix(3.0, size, step(0.5, aColour.a));
	vColour = aColour;
}`;

const fragment = `#version 300 es
precision highp float;
in vec4 vColour;
out vec4 finalColor;
void main() {
	float d = length(gl_PointCoord - 0.5) * 2.0;
	if (d > 1.0) discard;
	float halo = pow(1.0 - d, 2.4) * 0.55;
	float lamp = smoothstep(0.34, 0.14, d);
	vec3 lit = vColour.rgb * (halo + 0.75 * lamp) + vec3(0.35) * lamp * max(max(vColour.r, vColour.g), vColour.b);
	vec3 colour = mix(vColour.rgb, lit, step(0.5, vColour.a));
	finalColor = vec4(colour, 1.0);
}`;

/** Ink of a drone that shows no light: seen by the designer, not by the audience. */
const UNLIT = [0x2f, 0x3a, 0x5c] as const;
const BYTES = 16;

/** All drones as one point list: x y z floats and r g b a bytes, 16 bytes a drone, written in place at each frame. */
export class DroneLights {
	readonly mesh: Mesh<Geometry, Shader>;
	private buffer: Buffer;
	private floats = new Float32Array(0);
	private bytes = new Uint8Array(0);
	private readonly uniforms: UniformGroup;
	private drones = 0;

	constructor() {
		this.uniforms = new UniformGroup({
			uView: { value: new Float32Array(16), type: "mat4x4<f32>" },
			uPixels: { value: 1, type: "f32" },
			uPerspective: { value: 1, type: "f32" },
		});
		this.buffer = new Buffer({ data: new Float32Array(4), usage: BufferUsage.VERTEX | BufferUsage.COPY_DST });
		const geometry = new Geometry({
			topology: "point-list",
			attributes: {
				aPosition: { buffer: this.buffer, format: "float32x3", stride: BYTES, offset: 0 },
				aColour: { buffer: this.buffer, format: "unorm8x4", stride: BYTES, offset: 12 },
			},
		});
		const shader = new Shader({
			glProgram: GlProgram.from({ vertex, fragment, name: "drone-lights" }),
			resources: { camera: this.uniforms },
		});
		this.mesh = new Mesh({ geometry, shader });
		this.mesh.state.blend = true;
		this.mesh.blendMode = "add";
		this.mesh.state.depthTest = false;
		this.mesh.state.culling = false;
	}

	/** @param positions 3·N metres; @param colours 3·N sRGB bytes; unlit drones are drawn faint where `showUnlit` */
	write(positions: Float32Array, colours: Uint8Array, showUnlit: boolean): void {
		const drones = Math.floor(positions.length / 3);
		if (drones !== this.drones || this.floats.length === 0) {
			this.drones = drones;
			this.floats = new Float32Array(Math.max(4, drones * 4));
			this.bytes = new Uint8Array(this.floats.buffer);
			this.buffer.data = this.floats;
		}
		for (let i = 0; i < drones; i++) {
			this.floats[4 * i] = positions[3 * i]!;
			this.floats[4 * i + 1] = positions[3 * i + 1]!;
			this.floats[4 * i + 2] = positions[3 * i + 2]!;
			const at = BYTES * i + 12;
			const [r, g, b] = [colours[3 * i]!, colours[3 * i + 1]!, colours[3 * i + 2]!];
			const lit = r + g + b > 0;
			this.bytes[at] = lit ? r : showUnlit ? UNLIT[0] : 0;
			this.bytes[at + 1] = lit ? g : showUnlit ? UNLIT[1] : 0;
			this.bytes[at + 2] = lit ? b : showUnlit ? UNLIT[2] : 0;
			this.bytes[at + 3] = lit ? 255 : 0;
		}
		this.buffer.update();
		this.mesh.visible = drones > 0;
	}

	aim(camera: Camera, heightPixels: number): void {
		const uniforms = this.uniforms.uniforms as { uView: Float32Array; uPixels: number; uPerspective: number };
		uniforms.uView.set(camera.matrix);
		uniforms.uPixels = camera.scale * heightPixels;
		uniforms.uPerspective = camera.perspective ? 1 : 0;
		this.uniforms.update();
	}

	destroy(): void {
		this.mesh.destroy();
		this.buffer.destroy();
	}
}
