import { useEffect, useState } from "react";
import { Dialog, Heading, Modal, ModalOverlay } from "react-aria-components";
import { useStore } from "zustand";
import { desk } from "./desk.ts";
import { NumberField } from "./fields/Field.tsx";
import { useStudio, useStudioState } from "./studio-context.ts";

/** How many drones a rough cut is for. */
export function RoughCutQuestion() {
	const open = useStore(desk, (state) => state.asksRoughCut);
	const { commands } = useStudio();
	const count = useStudioState((state) => state.show?.fleet.count ?? 100);
	const hasCues = useStudioState((state) => (state.show?.cues.order.length ?? 0) > 0);
	const [drones, setDrones] = useState(count);
	useEffect(() => {
		if (open) setDrones(count);
	}, [open, count]);
	const close = () => desk.setState({ asksRoughCut: false });
	return (
		<ModalOverlay className="veil" isOpen={open} onOpenChange={(isOpen) => !isOpen && close()} isDismissable>
			<Modal className="floating dialog">
				<Dialog>
					<form
						onSubmit={(event) => {
							event.preventDefault();
							close();
							void commands.makeRoughCut({ drones });
						}}
					>
						<Heading slot="title">Rough cut</Heading>
						<p>
							A first set of cues from the music: a transition at every section at least, light that goes with it, and
							everything within what the fleet can fly.
						</p>
						<NumberField
							label="drones"
							value={drones}
							step={10}
							onSet={(value) => {
								const right = Number.isInteger(value) && value >= 1 && value <= 5000;
								if (right) setDrones(value);
								return right;
							}}
						/>
						{hasCues && (
							<p className="quiet small">
								It takes the place of the cues and formations that are there; undo brings them back.
							</p>
						)}
						<div className="buttons end">
							<button type="button" onClick={close}>
								Not now
							</button>
							<button type="submit" className="first">
								Make the rough cut
							</button>
						</div>
					</form>
				</Dialog>
			</Modal>
		</ModalOverlay>
	);
}
