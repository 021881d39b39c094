// What an RFQ asks of measured data, what a quote states of its measurement, and what scoring noted about a quote's data as a whole.
import { statements, type Migration } from "../umzug";

export const up: Migration = statements(
  "ALTER TABLE rfqs ADD COLUMN measurement_plan JSON NOT NULL DEFAULT '{}' AFTER assumed_setup",
  `ALTER TABLE quote_versions
    ADD COLUMN instrument JSON NOT NULL DEFAULT '{}' AFTER setup,
    ADD COLUMN drift JSON NULL AFTER instrument`,
  "ALTER TABLE measurements ADD COLUMN steps JSON NULL AFTER impedance2",
  "ALTER TABLE quote_summaries ADD COLUMN notes JSON NOT NULL DEFAULT '[]' AFTER temperatures",
);

export const down: Migration = statements(
  "ALTER TABLE quote_summaries DROP COLUMN notes",
  "ALTER TABLE measurements DROP COLUMN steps",
  "ALTER TABLE quote_versions DROP COLUMN drift, DROP COLUMN instrument",
  "ALTER TABLE rfqs DROP COLUMN measurement_plan",
);
