// The scoping hook: whose rows a query returns, and which queries it refuses.
import { expect, test } from "vitest";
import { Organisation, Quote, RequirementRow, Rfq, RfqQuantity, Specification, Supplier } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { buildInvitation, buildOrganisation, buildPerson, buildQuote, buildRfq } from "../support/factories";
import { useDatabase } from "../support/database";

useDatabase();

async function twoBuyersTwoSuppliers() {
  const [northgate, other] = [await buildOrganisation("buyer"), await buildOrganisation("buyer")];
  const [halden, kestrel] = [await buildOrganisation("supplier"), await buildOrganisation("supplier")];
  const engineer = await buildPerson(northgate);
  const stranger = await buildPerson(other);
  const { rfq, specification } = await buildRfq(engineer);
  const invited = await buildPerson(halden);
  const uninvited = await buildPerson(kestrel);
  const { invitation } = await buildInvitation(rfq, halden);
  return { engineer, stranger, invited, uninvited, rfq, specification, invitation };
}

test("a query on a tenant's table without an actor is refused, whatever its shape", async () => {
  await expect(Rfq.findAll()).rejects.toThrow("names no actor");
  await expect(Rfq.findByPk(1)).rejects.toThrow("names no actor");
  await expect(Rfq.count()).rejects.toThrow("names no actor");
  await expect(Rfq.update({ title: "x" }, { where: { id: 1 } })).rejects.toThrow("names no actor");
  await expect(Rfq.destroy({ where: { id: 1 } })).rejects.toThrow("names no actor");
});

test("a buyer sees its own RFQ, another buyer does not, by list, by id and by count", async () => {
  const { engineer, stranger, rfq } = await twoBuyersTwoSuppliers();
  expect(await Rfq.findAll({ actor: engineer })).toHaveLength(1);
  expect(await Rfq.findByPk(rfq.id, { actor: stranger })).toBeNull();
  expect(await Rfq.findOne({ where: { publicId: rfq.publicId }, actor: stranger })).toBeNull();
  expect(await Rfq.count({ actor: stranger })).toBe(0);
});

test("a supplier reaches RFQ, specification and lines through its accepted invitation alone", async () => {
  const { invited, uninvited, rfq, specification, invitation } = await twoBuyersTwoSuppliers();
  const seen = async (actor: typeof invited) => [
    await Rfq.count({ where: { id: rfq.id }, actor }),
    await Specification.count({ where: { id: specification.id }, actor }),
    await RequirementRow.count({ where: { revisionId: rfq.revisionId }, actor }),
  ];
  expect(await seen(invited)).toEqual([1, 1, 5]);
  expect(await seen(uninvited)).toEqual([0, 0, 0]);
  await invitation.update({ state: "revoked" });
  expect(await seen(invited)).toEqual([0, 0, 0]);
});

test("a supplier sees no buyer's directory", async () => {
  const { invited, engineer } = await twoBuyersTwoSuppliers();
  expect(await Supplier.count({ actor: engineer })).toBe(1);
  expect(await Supplier.count({ actor: invited })).toBe(0);
});

test("a quote stays hidden from the buyer until it is shared", async () => {
  const { engineer, invited, invitation } = await twoBuyersTwoSuppliers();
  const quote = await buildQuote(invitation, invited.organisationId);
  expect(await Quote.count({ actor: engineer })).toBe(0);
  await quote.update({ sharedAt: new Date() });
  expect(await Quote.count({ actor: engineer })).toBe(1);
});

test("an update or delete touches no row the actor does not see", async () => {
  const { stranger, engineer, rfq } = await twoBuyersTwoSuppliers();
  expect(await Rfq.update({ title: "taken" }, { where: { id: rfq.id }, actor: stranger })).toEqual([0]);
  expect(await Rfq.update({ title: "ours" }, { where: { id: rfq.id }, actor: engineer })).toEqual([1]);
  expect(await RfqQuantity.destroy({ where: { rfqId: rfq.id }, actor: stranger })).toBe(0);
  expect(await RfqQuantity.destroy({ where: { rfqId: rfq.id, quantity: 100 }, actor: engineer })).toBe(1);
});

test("a query that passes no hook is refused on a tenant's table, even for the system", async () => {
  const { rfq } = await twoBuyersTwoSuppliers();
  expect(() => Rfq.sum("quantity", { actor: SYSTEM })).toThrow("passes no hook");
  expect(() => Rfq.max("id")).toThrow("passes no hook");
  expect(() => Rfq.increment("quantity", { where: { id: rfq.id } })).toThrow("passes no hook");
  expect((await Rfq.findByPk(rfq.id, { actor: SYSTEM }))?.quantity).toBe(rfq.quantity);
});

test("a join past the hook is refused, and the system actor has to be named", async () => {
  await twoBuyersTwoSuppliers();
  await expect(Rfq.findAll({ actor: SYSTEM, include: [{ association: "specification" }] })).rejects.toThrow();
  expect(await Organisation.count({ actor: SYSTEM })).toBe(4);
});
