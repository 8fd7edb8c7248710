import { Dialog, Heading, Modal, ModalOverlay } from "react-aria-components";
import { useStore } from "zustand";
import type { Action } from "./actions.ts";
import { desk } from "./desk.ts";

/** All keys, by theme. */
export function KeysList({ actions }: { actions: readonly Action[] }) {
	const open = useStore(desk, (state) => state.keysShown);
	const close = () => desk.setState({ keysShown: false });
	const themes = [...new Set(actions.map((action) => action.theme))];
	return (
		<ModalOverlay className="veil" isOpen={open} onOpenChange={(isOpen) => !isOpen && close()} isDismissable>
			<Modal className="floating dialog wide">
				<Dialog>
					<Heading slot="title">Keys</Heading>
					<p className="quiet small">
						On the staves: drag an end or a whole cue; it snaps to beats, with Shift to quarters, with Alt to nothing.
						Drag a beat by its tick: it finds an onset of the sound, with Alt it doesn't. Ctrl and the wheel zoom.
					</p>
					<div className="keys">
						{themes.map((theme) => (
							<section key={theme}>
								<h3>{theme}</h3>
								<dl>
									{actions
										.filter((action) => action.theme === theme && action.keys)
										.map((action) => (
											<div key={action.id}>
												<dt>{action.name}</dt>
												<dd>
													<kbd>{action.keys}</kbd>
												</dd>
											</div>
										))}
								</dl>
							</section>
						))}
					</div>
					<div className="buttons end">
						<button type="button" onClick={close}>
							Close
						</button>
					</div>
				</Dialog>
			</Modal>
		</ModalOverlay>
	);
}
