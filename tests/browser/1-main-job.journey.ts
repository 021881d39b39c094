// The main job, end to end: from the first administrator to the regret mail, on measured files, against the built product.
import type { Journey } from "./journey";
import { accountSteps, requestSteps, specificationSteps, type Scene } from "./buyer-steps";
import { decisionSteps, resultSteps } from "./decision-steps";
import { supplierSteps } from "./supplier-steps";

const journey: Journey = {
  title: "The main job, end to end",
  steps: (world) => {
    const scene: Scene = { rfqPage: "", rfqNumber: "" };
    return [
      ...accountSteps(world),
      ...specificationSteps(world),
      ...requestSteps(world, scene),
      ...supplierSteps(world, scene),
      ...resultSteps(world),
      ...decisionSteps(world, scene),
    ];
  },
};

export default journey;
