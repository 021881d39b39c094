// A lot of five units at three temperatures in two sweeps each: planned, uploaded, scored and read, with one conditional fail and one hole.
import type { Journey } from "./journey";
import { lotSteps } from "./lot-steps";

const journey: Journey = { title: "A lot of five units at three temperatures in two sweeps each", steps: lotSteps };

export default journey;
