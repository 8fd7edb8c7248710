import { X } from "lucide-react";
import { useStudio, useStudioState } from "./studio-context.ts";

/** Sentences for the user; errors stay until they are put away. */
export function Notices() {
	const notices = useStudioState((state) => state.notices);
	const { commands } = useStudio();
	return (
		<div className="notices" role="log" aria-label="Notices">
			{notices.map((notice) => (
				<div key={notice.id} className={`notice ${notice.kind}`} role={notice.kind === "error" ? "alert" : "status"}>
					<p>{notice.text}</p>
					<button
						type="button"
						className="icon plain"
						aria-label="Put away"
						onClick={() => commands.dismissNotice(notice.id)}
					>
						<X size={16} aria-hidden />
					</button>
				</div>
			))}
		</div>
	);
}
