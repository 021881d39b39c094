// The demo: a buyer, three suppliers, one RFQ with its quotes in, one still open, one draft; made by the product's own use cases.
import { Organisation } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { foundBuyer } from "./demo-people";
import { beginOutdoorQuote, quoteFirstSeries } from "./demo-quotes";
import { approveSuppliers, closeRequest, requestFirstSeries, requestOutdoorSeries } from "./demo-requests";
import { writeDraftSpecification, writeReceiveFilter } from "./demo-specifications";

export { demoSignIns } from "./demo-cast";

/** Fills an installation that holds no organisation yet; leaves any other alone. All dates are relative to now. */
export async function seedDemo(): Promise<void> {
  if ((await Organisation.count({ actor: SYSTEM })) > 0) return;
  const { engineer, purchasing } = await foundBuyer();
  const specification = await writeReceiveFilter(engineer);
  await writeDraftSpecification(engineer);

  const rfq = await requestFirstSeries(engineer, specification);
  await approveSuppliers(purchasing);
  await quoteFirstSeries();
  await closeRequest(engineer, rfq);

  await requestOutdoorSeries(engineer, specification);
  await beginOutdoorQuote();
}
