import { useEffect } from "react";
import type { Inquired } from "../app/index.ts";
import { useStudio, useStudioState } from "./studio-context.ts";

/** Looks into a part of the show as long as the caller is on screen. @returns what is known of it; null: nothing yet */
export function useLookInto(kind: Inquired["part"]["kind"], id: string | null): Inquired | null {
	const { commands } = useStudio();
	useEffect(() => {
		if (id === null) return;
		commands.lookInto({ kind, id });
		return () => commands.lookInto(null);
	}, [commands, kind, id]);
	const inquired = useStudioState((state) => state.inquired);
	return inquired?.part.kind === kind && inquired.part.id === id ? inquired : null;
}
