// A buyer's supplier directory: entries with their status and addresses, made as suppliers are invited.
import { Op, type Transaction } from "sequelize";
import { Invitation, Organisation, Supplier, SupplierContact } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { ok, type Result } from "~/forms/form";
import { SUPPLIER_STATUSES, type SupplierStatus } from "~/forms/supplier-status";
import { recordEvent } from "./audit.server";
import { newPublicId } from "./identifiers.server";
import type { Person } from "./person.server";
import { inTransaction } from "./transaction.server";

/** The entry of that name, made as a candidate where there is none. Upper and lower case are the same name, "ü" and "u" are not. */
export async function supplierByName(
  person: Person,
  name: string,
  now: Date,
  transaction: Transaction,
): Promise<Supplier> {
  const lock = transaction.LOCK.UPDATE;
  // One at a time for each buyer: two who add the same new company meet here, and the second finds the first's entry.
  await Organisation.findByPk(person.organisationId, { actor: person, transaction, lock, rejectOnEmpty: true });
  const entries = await Supplier.findAll({ actor: person, transaction });
  const alike = entries.find((entry) => entry.name.toLowerCase() === name.toLowerCase());
  if (alike) return alike;
  const entry = { buyerOrganisationId: person.organisationId, name, publicId: newPublicId(), createdAt: now };
  return Supplier.create(entry, { transaction });
}

/** Keeps an address with an entry, once. */
export async function keepContact(
  supplier: Supplier,
  email: string,
  now: Date,
  transaction: Transaction,
): Promise<void> {
  await SupplierContact.bulkCreate(
    [{ buyerOrganisationId: supplier.buyerOrganisationId, supplierId: supplier.id, email, createdAt: now }],
    { transaction, ignoreDuplicates: true },
  );
}

/** Names of the directory's entries by id, for rows that carry one. */
export async function supplierNames(
  person: Person,
  rows: readonly { readonly supplierId: number }[],
  transaction?: Transaction,
): Promise<Map<number, string>> {
  if (rows.length === 0) return new Map();
  const suppliers = await Supplier.findAll({
    where: { id: rows.map(({ supplierId }) => supplierId) },
    attributes: ["id", "name"],
    actor: person,
    transaction,
  });
  return new Map(suppliers.map(({ id, name }) => [id, name]));
}

/** Why the first blocked one of the entries that rows carry is not mailed, or null where none is; the entries are locked. */
export async function blockedRefusal(
  person: Person,
  rows: readonly { readonly supplierId: number }[],
  transaction: Transaction,
): Promise<string | null> {
  const where = { id: rows.map(({ supplierId }) => supplierId) };
  const lock = transaction.LOCK.UPDATE;
  const suppliers = await Supplier.findAll({ where, order: [["id", "ASC"]], actor: person, transaction, lock });
  const blocked = suppliers.find(({ status }) => status === "blocked");
  return blocked ? `${blocked.name} is blocked in your supplier directory.` : null;
}

/** Every name of the directory that may be invited, for completion while typing. */
export async function suggestSuppliers(person: Person): Promise<{ company: string; email: string }[]> {
  const suppliers = await Supplier.findAll({
    where: { status: { [Op.ne]: "blocked" } },
    order: [["name", "ASC"]],
    limit: 200,
    actor: person,
  });
  const contacts = await contactsOf(person, suppliers);
  return suppliers.map(({ id, name }) => ({ company: name, email: contacts.get(id)?.[0] ?? "" }));
}

export const SUPPLIERS_A_PAGE = 50;

export interface DirectoryEntry {
  readonly publicId: string;
  readonly name: string;
  readonly status: SupplierStatus;
  readonly contacts: readonly string[];
  /** RFQs it was sent an invitation to, whatever came of it. */
  readonly invitedTo: number;
}

export interface Directory {
  readonly entries: readonly DirectoryEntry[];
  /** By status, over all pages. */
  readonly counts: Readonly<Record<SupplierStatus, number>>;
  readonly total: number;
  readonly pages: number;
}

/** One page of the directory by name; `page` counts from 1. */
export async function listSuppliers(
  person: Person,
  { status, page }: { readonly status: SupplierStatus | null; readonly page: number },
): Promise<Directory> {
  const [grouped, suppliers] = await Promise.all([
    Supplier.count({ group: ["status"], actor: person }),
    Supplier.findAll({
      where: status === null ? {} : { status },
      order: [["name", "ASC"]],
      limit: SUPPLIERS_A_PAGE,
      offset: (page - 1) * SUPPLIERS_A_PAGE,
      actor: person,
    }),
  ]);
  const [contacts, invited] = await Promise.all([contactsOf(person, suppliers), invitedTo(person, suppliers)]);
  const counts = { candidate: 0, approved: 0, blocked: 0 };
  for (const group of grouped) if (isStatus(group.status)) counts[group.status] = group.count;
  const all = counts.candidate + counts.approved + counts.blocked;
  const total = status === null ? all : counts[status];
  const entries = suppliers.map((supplier) => ({
    publicId: supplier.publicId,
    name: supplier.name,
    status: supplier.status,
    contacts: contacts.get(supplier.id) ?? [],
    invitedTo: invited.get(supplier.id) ?? 0,
  }));
  return { entries, counts, total, pages: Math.max(1, Math.ceil(total / SUPPLIERS_A_PAGE)) };
}

const isStatus = (value: unknown): value is SupplierStatus => SUPPLIER_STATUSES.some((status) => status === value);

async function contactsOf(person: Person, suppliers: readonly Supplier[]): Promise<Map<number, string[]>> {
  if (suppliers.length === 0) return new Map();
  const where = { supplierId: suppliers.map(({ id }) => id) };
  const rows = await SupplierContact.findAll({ where, order: [["id", "ASC"]], actor: person });
  const contacts = new Map<number, string[]>();
  for (const { supplierId, email } of rows) contacts.set(supplierId, [...(contacts.get(supplierId) ?? []), email]);
  return contacts;
}

async function invitedTo(person: Person, suppliers: readonly Supplier[]): Promise<Map<number, number>> {
  if (suppliers.length === 0) return new Map();
  const groups = await Invitation.count({
    where: { supplierId: suppliers.map(({ id }) => id), sentAt: { [Op.ne]: null } },
    group: ["supplier_id"],
    actor: person,
  });
  return new Map(groups.map((group) => [Number(group.supplier_id), group.count]));
}

/** Sets an entry's status. A blocked supplier is not invited again; invitations it has stay. Null where the person does not see it. */
export async function setSupplierStatus(
  person: Person,
  publicId: string,
  status: SupplierStatus,
): Promise<Result<null> | null> {
  return inTransaction(async (transaction) => {
    const lock = transaction.LOCK.UPDATE;
    const supplier = await Supplier.findOne({ where: { publicId }, actor: person, transaction, lock });
    if (!supplier) return null;
    if (supplier.status === status) return ok(null);
    const detail = { company: supplier.name, from: supplier.status, to: status };
    const entry = { subject: "supplier", action: "rated", buyerOrganisationId: supplier.buyerOrganisationId, detail };
    await recordEvent(person, await databaseNow(transaction), entry, transaction);
    await supplier.update({ status }, { transaction });
    return ok(null);
  });
}
