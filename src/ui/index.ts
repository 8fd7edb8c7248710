export { mountUi } from "./mount-ui.tsx";
