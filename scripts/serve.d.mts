import type { Server } from "node:http";

/** A static server over `folder`; GET and HEAD only, nothing outside the folder. */
export function createAppServer(folder: string): Server;
export const DEFAULT_PORT: number;
