import { useState } from "react";
import {
	Autocomplete,
	Dialog,
	Input,
	Menu,
	MenuItem,
	Modal,
	ModalOverlay,
	Text,
	TextField,
	useFilter,
} from "react-aria-components";
import { useStore } from "zustand";
import type { Action } from "./actions.ts";
import { desk } from "./desk.ts";

/** Every command by its name: type a few letters, Enter runs the first. */
export function CommandFinder({ actions }: { actions: readonly Action[] }) {
	const open = useStore(desk, (state) => state.finder);
	const { contains } = useFilter({ sensitivity: "base" });
	const [asked, setAsked] = useState("");
	const close = () => {
		setAsked("");
		desk.setState({ finder: false });
	};
	const usable = actions.filter((action) => action.id !== "finder" && (action.available?.() ?? true));
	return (
		<ModalOverlay className="veil top" isOpen={open} onOpenChange={(isOpen) => !isOpen && close()} isDismissable>
			<Modal className="floating finder">
				<Dialog aria-label="Find a command">
					<Autocomplete filter={contains} inputValue={asked} onInputChange={setAsked}>
						<TextField aria-label="Command" autoFocus>
							<Input placeholder="What do you want to do?" />
						</TextField>
						<Menu
							className="menu"
							items={usable}
							renderEmptyState={() => <p className="quiet">No command of that name.</p>}
							onAction={(id) => {
								close();
								usable.find((action) => action.id === id)?.run();
							}}
						>
							{(action) => (
								<MenuItem id={action.id} textValue={action.name}>
									<Text slot="label">{action.name}</Text>
									{action.keys && <kbd>{action.keys}</kbd>}
								</MenuItem>
							)}
						</Menu>
					</Autocomplete>
				</Dialog>
			</Modal>
		</ModalOverlay>
	);
}
