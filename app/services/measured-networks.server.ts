// The networks of stored sweeps, read from the uploaded bytes each time: a corrected reader applies to old files too.
import { Op } from "sequelize";
import { MeasurementRow, StoredFile } from "~/db/models";
import type { QueryActor } from "~/db/scoping";
import { parseTouchstone, type TwoPort } from "~/rf/index";
import { readFileBytes } from "./file-bytes.server";

export interface MeasuredNetwork {
  readonly measurement: MeasurementRow;
  readonly fileName: string;
  readonly network: TwoPort;
}

/** Networks of the sweeps the actor sees, in the order given, one at a time: two hundred at once can fill the memory. */
export async function* eachNetwork(
  actor: QueryActor,
  measurementIds: readonly number[],
): AsyncGenerator<MeasuredNetwork, void> {
  const measurements = await MeasurementRow.findAll({ where: { id: { [Op.in]: [...measurementIds] } }, actor });
  const files = await StoredFile.findAll({
    where: { id: { [Op.in]: measurements.map(({ fileId }) => fileId) } },
    actor,
  });
  const names = new Map(files.map(({ id, name }) => [id, name]));
  const byId = new Map(measurements.map((measurement) => [measurement.id, measurement]));
  for (const id of measurementIds) {
    const measurement = byId.get(id);
    if (!measurement) continue;
    const fileName = names.get(measurement.fileId) ?? "";
    const network = parseTouchstone(await readFileBytes(actor, measurement.fileId), fileName);
    yield { measurement, fileName, network };
  }
}

/** All of them; `report` is told how many are read. */
export async function readNetworks(
  actor: QueryActor,
  measurementIds: readonly number[],
  report?: (done: number) => Promise<void>,
): Promise<MeasuredNetwork[]> {
  const networks: MeasuredNetwork[] = [];
  for await (const network of eachNetwork(actor, measurementIds)) {
    networks.push(network);
    await report?.(networks.length);
  }
  return networks;
}
