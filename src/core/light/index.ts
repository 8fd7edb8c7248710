export { type Flash, findFlashes } from "./flashes.ts";
export { lightAt } from "./light-at.ts";
export { compileLight, type LightProgram } from "./program.ts";
export { linearOf, luminanceOf, toCoded, toLinear } from "./srgb.ts";
