// Files are checked in the supplier's browser before any is sent: nothing leaves it, and its figures are the server's.
import { checkSteps } from "./check-steps";
import type { Journey } from "./journey";

const journey: Journey = { title: "Checked before upload", steps: checkSteps };

export default journey;
