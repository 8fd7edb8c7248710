export type { Samples } from "./samples.ts";
