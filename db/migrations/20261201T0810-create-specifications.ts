// Specifications, their revisions and lines.
import { statements, type Migration } from "../umzug";

export const up: Migration = statements(
  `CREATE TABLE specifications (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    public_id CHAR(16) CHARACTER SET ascii NOT NULL,
    buyer_organisation_id INT UNSIGNED NOT NULL,
    number INT UNSIGNED NOT NULL,
    title VARCHAR(90) NOT NULL,
    owner_id INT UNSIGNED NOT NULL,
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY specifications_public_id (public_id),
    UNIQUE KEY specifications_number (buyer_organisation_id, number),
    KEY specifications_list (buyer_organisation_id, created_at, id),
    CONSTRAINT fk_specifications_buyer FOREIGN KEY (buyer_organisation_id) REFERENCES organisations (id) ON DELETE RESTRICT,
    CONSTRAINT fk_specifications_owner FOREIGN KEY (owner_id) REFERENCES users (id) ON DELETE RESTRICT
  ) ENGINE=InnoDB DEFAULT CHARSET=utf8mb4`,
  // One draft a specification at most: the generated column is NULL, and so never equal, for frozen revisions.
  `CREATE TABLE specification_revisions (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    buyer_organisation_id INT UNSIGNED NOT NULL,
    specification_id INT UNSIGNED NOT NULL,
    letter VARCHAR(3) CHARACTER SET ascii NOT NULL,
    status ENUM('draft', 'released', 'superseded') NOT NULL DEFAULT 'draft',
    title VARCHAR(90) NOT NULL,
    impedance1 DOUBLE NOT NULL,
    impedance2 DOUBLE NOT NULL,
    ambient DOUBLE NOT NULL,
    temperature_from DOUBLE NULL,
    temperature_to DOUBLE NULL,
    lowest_test_frequency DOUBLE NULL,
    lock_version INT UNSIGNED NOT NULL DEFAULT 0,
    content_hash BINARY(32) NULL,
    released_at DATETIME(3) NULL,
    released_by INT UNSIGNED NULL,
    saved_at DATETIME(3) NOT NULL,
    created_at DATETIME(3) NOT NULL,
    draft_of INT UNSIGNED AS (IF(status = 'draft', specification_id, NULL)) STORED,
    UNIQUE KEY specification_revisions_letter (specification_id, letter),
    UNIQUE KEY specification_revisions_draft (draft_of),
    KEY specification_revisions_buyer (buyer_organisation_id, status),
    CONSTRAINT fk_specification_revisions_specification FOREIGN KEY (specification_id) REFERENCES specifications (id) ON DELETE RESTRICT,
    CONSTRAINT fk_specification_revisions_releaser FOREIGN KEY (released_by) REFERENCES users (id) ON DELETE RESTRICT,
    CONSTRAINT specification_revisions_impedance CHECK (impedance1 > 0 AND impedance2 > 0),
    CONSTRAINT specification_revisions_range CHECK (
      (temperature_from IS NULL AND temperature_to IS NULL) OR temperature_from <= temperature_to
    ),
    CONSTRAINT specification_revisions_release CHECK ((status = 'draft') = (released_at IS NULL))
  ) ENGINE=InnoDB DEFAULT CHARSET=utf8mb4`,
  `CREATE TABLE requirements (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    buyer_organisation_id INT UNSIGNED NOT NULL,
    revision_id INT UNSIGNED NOT NULL,
    ordinal INT UNSIGNED NOT NULL,
    line_key VARCHAR(16) CHARACTER SET ascii NOT NULL,
    line_number VARCHAR(12) CHARACTER SET ascii NOT NULL,
    kind VARCHAR(32) CHARACTER SET ascii NOT NULL,
    definition JSON NOT NULL,
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY requirements_ordinal (revision_id, ordinal),
    UNIQUE KEY requirements_line_key (revision_id, line_key),
    UNIQUE KEY requirements_line_number (revision_id, line_number),
    CONSTRAINT fk_requirements_revision FOREIGN KEY (revision_id) REFERENCES specification_revisions (id) ON DELETE RESTRICT
  ) ENGINE=InnoDB DEFAULT CHARSET=utf8mb4`,
);

export const down: Migration = statements(
  "DROP TABLE requirements",
  "DROP TABLE specification_revisions",
  "DROP TABLE specifications",
);
