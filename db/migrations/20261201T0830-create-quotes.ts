// Quotes, their frozen versions, files and measured sweeps, and what scoring stored of them.
import { statements, type Migration } from "../umzug";

const tenants = `buyer_organisation_id INT UNSIGNED NOT NULL,
    supplier_organisation_id INT UNSIGNED NOT NULL,`;
const table = "ENGINE=InnoDB DEFAULT CHARSET=utf8mb4";

export const up: Migration = statements(
  `CREATE TABLE quotes (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    public_id CHAR(16) CHARACTER SET ascii NOT NULL,
    ${tenants}
    invitation_id INT UNSIGNED NOT NULL,
    rfq_id INT UNSIGNED NOT NULL,
    state ENUM('draft', 'submitted', 'withdrawn') NOT NULL DEFAULT 'draft',
    draft JSON NOT NULL,
    basis ENUM('measured', 'similar', 'simulated') NOT NULL DEFAULT 'measured',
    lock_version INT UNSIGNED NOT NULL DEFAULT 0,
    current_version_id INT UNSIGNED NULL,
    shared_at DATETIME(3) NULL,
    outcome ENUM('awarded', 'regretted') NULL,
    saved_at DATETIME(3) NOT NULL,
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY quotes_public_id (public_id),
    UNIQUE KEY quotes_invitation (invitation_id),
    KEY quotes_rfq (rfq_id, state),
    KEY quotes_supplier (supplier_organisation_id, state, id),
    CONSTRAINT fk_quotes_invitation FOREIGN KEY (invitation_id) REFERENCES invitations (id) ON DELETE RESTRICT,
    CONSTRAINT fk_quotes_rfq FOREIGN KEY (rfq_id) REFERENCES rfqs (id) ON DELETE RESTRICT,
    CONSTRAINT quotes_submitted CHECK (state <> 'submitted' OR (current_version_id IS NOT NULL AND shared_at IS NOT NULL))
  ) ${table}`,
  `CREATE TABLE quote_versions (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    ${tenants}
    quote_id INT UNSIGNED NOT NULL,
    rfq_id INT UNSIGNED NOT NULL,
    revision_id INT UNSIGNED NOT NULL,
    number INT UNSIGNED NOT NULL,
    submitted_at DATETIME(3) NOT NULL,
    submitted_by INT UNSIGNED NOT NULL,
    submitter_name VARCHAR(120) NOT NULL,
    basis ENUM('measured', 'similar', 'simulated') NOT NULL,
    currency CHAR(3) NOT NULL,
    nre DECIMAL(18, 4) NOT NULL,
    lead_first_days INT UNSIGNED NULL,
    lead_volume_days INT UNSIGNED NOT NULL,
    minimum_quantity INT UNSIGNED NULL,
    order_multiple INT UNSIGNED NULL,
    valid_until DATE NOT NULL,
    incoterms CHAR(3) NULL,
    place VARCHAR(120) NULL,
    payment_terms VARCHAR(500) NULL,
    remarks TEXT NULL,
    setup JSON NOT NULL,
    content_hash BINARY(32) NOT NULL,
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY quote_versions_number (quote_id, number),
    KEY quote_versions_rfq (rfq_id),
    CONSTRAINT fk_quote_versions_quote FOREIGN KEY (quote_id) REFERENCES quotes (id) ON DELETE RESTRICT,
    CONSTRAINT fk_quote_versions_revision FOREIGN KEY (revision_id) REFERENCES specification_revisions (id) ON DELETE RESTRICT,
    CONSTRAINT fk_quote_versions_submitter FOREIGN KEY (submitted_by) REFERENCES users (id) ON DELETE RESTRICT,
    CONSTRAINT quote_versions_money CHECK (nre >= 0),
    CONSTRAINT quote_versions_place CHECK (incoterms IS NULL OR place IS NOT NULL)
  ) ${table}`,
  `ALTER TABLE quotes ADD CONSTRAINT fk_quotes_current_version
    FOREIGN KEY (current_version_id) REFERENCES quote_versions (id) ON DELETE RESTRICT`,
  `CREATE TABLE quote_prices (
    ${tenants}
    version_id INT UNSIGNED NOT NULL,
    quantity INT UNSIGNED NOT NULL,
    unit_price DECIMAL(18, 4) NOT NULL,
    PRIMARY KEY (version_id, quantity),
    CONSTRAINT fk_quote_prices_version FOREIGN KEY (version_id) REFERENCES quote_versions (id) ON DELETE RESTRICT,
    CONSTRAINT quote_prices_positive CHECK (unit_price > 0)
  ) ${table}`,
  `CREATE TABLE quote_declarations (
    ${tenants}
    version_id INT UNSIGNED NOT NULL,
    line_key VARCHAR(16) CHARACTER SET ascii NOT NULL,
    answer ENUM('comply', 'exception') NOT NULL,
    text TEXT NULL,
    PRIMARY KEY (version_id, line_key),
    CONSTRAINT fk_quote_declarations_version FOREIGN KEY (version_id) REFERENCES quote_versions (id) ON DELETE RESTRICT,
    CONSTRAINT quote_declarations_text CHECK (answer = 'comply' OR text IS NOT NULL)
  ) ${table}`,
  `CREATE TABLE files (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    public_id CHAR(16) CHARACTER SET ascii NOT NULL,
    ${tenants}
    quote_id INT UNSIGNED NOT NULL,
    name VARCHAR(255) NOT NULL,
    media_type VARCHAR(80) NOT NULL,
    size INT UNSIGNED NOT NULL,
    sha256 BINARY(32) NOT NULL,
    shared_at DATETIME(3) NULL,
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY files_public_id (public_id),
    KEY files_owner_hash (supplier_organisation_id, sha256),
    KEY files_quote (quote_id, id),
    CONSTRAINT fk_files_quote FOREIGN KEY (quote_id) REFERENCES quotes (id) ON DELETE RESTRICT
  ) ${table}`,
  `CREATE TABLE file_chunks (
    file_id INT UNSIGNED NOT NULL,
    ordinal INT UNSIGNED NOT NULL,
    bytes MEDIUMBLOB NOT NULL,
    PRIMARY KEY (file_id, ordinal),
    CONSTRAINT fk_file_chunks_file FOREIGN KEY (file_id) REFERENCES files (id) ON DELETE RESTRICT
  ) ${table}`,
  `CREATE TABLE measurements (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    public_id CHAR(16) CHARACTER SET ascii NOT NULL,
    ${tenants}
    quote_id INT UNSIGNED NOT NULL,
    file_id INT UNSIGNED NOT NULL,
    serial VARCHAR(60) NULL,
    temperature DECIMAL(5, 1) NULL,
    points INT UNSIGNED NOT NULL,
    frequency_from DOUBLE NOT NULL,
    frequency_to DOUBLE NOT NULL,
    impedance1 DOUBLE NOT NULL,
    impedance2 DOUBLE NOT NULL,
    notes JSON NOT NULL,
    setup JSON NULL,
    removed_at DATETIME(3) NULL,
    shared_at DATETIME(3) NULL,
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY measurements_public_id (public_id),
    UNIQUE KEY measurements_file (file_id),
    KEY measurements_quote (quote_id, removed_at, serial, temperature),
    CONSTRAINT fk_measurements_quote FOREIGN KEY (quote_id) REFERENCES quotes (id) ON DELETE RESTRICT,
    CONSTRAINT fk_measurements_file FOREIGN KEY (file_id) REFERENCES files (id) ON DELETE RESTRICT
  ) ${table}`,
  `CREATE TABLE measurement_results (
    ${tenants}
    measurement_id INT UNSIGNED NOT NULL,
    revision_id INT UNSIGNED NOT NULL,
    core_version VARCHAR(16) CHARACTER SET ascii NOT NULL,
    setup_hash VARCHAR(32) CHARACTER SET ascii NOT NULL,
    results JSON NOT NULL,
    verdict VARCHAR(20) CHARACTER SET ascii NOT NULL,
    created_at DATETIME(3) NOT NULL,
    PRIMARY KEY (measurement_id, revision_id, core_version, setup_hash),
    CONSTRAINT fk_measurement_results_measurement FOREIGN KEY (measurement_id) REFERENCES measurements (id) ON DELETE RESTRICT,
    CONSTRAINT fk_measurement_results_revision FOREIGN KEY (revision_id) REFERENCES specification_revisions (id) ON DELETE RESTRICT
  ) ${table}`,
  `CREATE TABLE version_measurements (
    ${tenants}
    version_id INT UNSIGNED NOT NULL,
    measurement_id INT UNSIGNED NOT NULL,
    PRIMARY KEY (version_id, measurement_id),
    KEY version_measurements_measurement (measurement_id),
    CONSTRAINT fk_version_measurements_version FOREIGN KEY (version_id) REFERENCES quote_versions (id) ON DELETE RESTRICT,
    CONSTRAINT fk_version_measurements_measurement FOREIGN KEY (measurement_id) REFERENCES measurements (id) ON DELETE RESTRICT
  ) ${table}`,
  `CREATE TABLE quote_line_results (
    ${tenants}
    version_id INT UNSIGNED NOT NULL,
    revision_id INT UNSIGNED NOT NULL,
    core_version VARCHAR(16) CHARACTER SET ascii NOT NULL,
    line_key VARCHAR(16) CHARACTER SET ascii NOT NULL,
    verdict VARCHAR(20) CHARACTER SET ascii NOT NULL,
    value DOUBLE NULL,
    margin DOUBLE NULL,
    credited_margin DOUBLE NULL,
    frequency DOUBLE NULL,
    unit VARCHAR(60) NULL,
    temperature DECIMAL(5, 1) NULL,
    cells JSON NOT NULL,
    reason TEXT NULL,
    PRIMARY KEY (version_id, revision_id, core_version, line_key),
    CONSTRAINT fk_quote_line_results_version FOREIGN KEY (version_id) REFERENCES quote_versions (id) ON DELETE RESTRICT,
    CONSTRAINT fk_quote_line_results_revision FOREIGN KEY (revision_id) REFERENCES specification_revisions (id) ON DELETE RESTRICT
  ) ${table}`,
  `CREATE TABLE quote_summaries (
    ${tenants}
    version_id INT UNSIGNED NOT NULL,
    revision_id INT UNSIGNED NOT NULL,
    core_version VARCHAR(16) CHARACTER SET ascii NOT NULL,
    verdict VARCHAR(20) CHARACTER SET ascii NOT NULL,
    conforming TINYINT(1) NOT NULL,
    worst_line_key VARCHAR(16) CHARACTER SET ascii NULL,
    worst_margin DOUBLE NULL,
    worst_credited_margin DOUBLE NULL,
    units INT UNSIGNED NOT NULL,
    units_over_range INT UNSIGNED NOT NULL,
    temperatures INT UNSIGNED NOT NULL,
    created_at DATETIME(3) NOT NULL,
    PRIMARY KEY (version_id, revision_id, core_version),
    CONSTRAINT fk_quote_summaries_version FOREIGN KEY (version_id) REFERENCES quote_versions (id) ON DELETE RESTRICT,
    CONSTRAINT fk_quote_summaries_revision FOREIGN KEY (revision_id) REFERENCES specification_revisions (id) ON DELETE RESTRICT
  ) ${table}`,
);

export const down: Migration = statements(
  "DROP TABLE quote_summaries",
  "DROP TABLE quote_line_results",
  "DROP TABLE version_measurements",
  "DROP TABLE measurement_results",
  "DROP TABLE measurements",
  "DROP TABLE file_chunks",
  "DROP TABLE files",
  "DROP TABLE quote_declarations",
  "DROP TABLE quote_prices",
  "ALTER TABLE quotes DROP CONSTRAINT fk_quotes_current_version",
  "DROP TABLE quote_versions",
  "DROP TABLE quotes",
);
