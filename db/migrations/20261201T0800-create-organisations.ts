// Organisations, people, sign-in: who is here and how they prove it.
import { statements, type Migration } from "../umzug";

export const up: Migration = statements(
  `CREATE TABLE organisations (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    public_id CHAR(16) CHARACTER SET ascii NOT NULL,
    kind ENUM('buyer', 'supplier') NOT NULL,
    name VARCHAR(120) NOT NULL,
    time_zone VARCHAR(64) NOT NULL,
    currency CHAR(3) NOT NULL,
    second_person TINYINT(1) NOT NULL DEFAULT 1,
    decision_rule ENUM('simple', 'guarded') NOT NULL DEFAULT 'simple',
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY organisations_public_id (public_id),
    UNIQUE KEY organisations_id_kind (id, kind)
  ) ENGINE=InnoDB DEFAULT CHARSET=utf8mb4`,
  `CREATE TABLE users (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    public_id CHAR(16) CHARACTER SET ascii NOT NULL,
    organisation_id INT UNSIGNED NOT NULL,
    organisation_kind ENUM('buyer', 'supplier') NOT NULL,
    email VARCHAR(254) NOT NULL,
    name VARCHAR(120) NOT NULL,
    role ENUM('engineer', 'purchasing', 'admin', 'supplier') NOT NULL,
    password_hash VARCHAR(255) NULL,
    disabled_at DATETIME(3) NULL,
    time_zone VARCHAR(64) NOT NULL,
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY users_public_id (public_id),
    UNIQUE KEY users_email (email),
    KEY users_organisation (organisation_id, name),
    CONSTRAINT fk_users_organisation FOREIGN KEY (organisation_id, organisation_kind) REFERENCES organisations (id, kind) ON DELETE RESTRICT,
    CONSTRAINT users_role CHECK ((role = 'supplier') = (organisation_kind = 'supplier'))
  ) ENGINE=InnoDB DEFAULT CHARSET=utf8mb4`,
  `CREATE TABLE sessions (
    token_hash BINARY(32) NOT NULL PRIMARY KEY,
    user_id INT UNSIGNED NOT NULL,
    created_at DATETIME(3) NOT NULL,
    last_seen_at DATETIME(3) NOT NULL,
    expires_at DATETIME(3) NOT NULL,
    revoked_at DATETIME(3) NULL,
    user_agent VARCHAR(255) NULL,
    ip VARCHAR(45) NULL,
    KEY sessions_user (user_id, expires_at),
    KEY sessions_expires (expires_at),
    CONSTRAINT fk_sessions_user FOREIGN KEY (user_id) REFERENCES users (id) ON DELETE RESTRICT
  ) ENGINE=InnoDB DEFAULT CHARSET=utf8mb4`,
  `CREATE TABLE idempotency_keys (
    user_id INT UNSIGNED NOT NULL,
    \`key\` VARCHAR(64) CHARACTER SET ascii NOT NULL,
    request_hash BINARY(32) NOT NULL,
    response JSON NULL,
    created_at DATETIME(3) NOT NULL,
    PRIMARY KEY (user_id, \`key\`),
    KEY idempotency_keys_created (created_at),
    CONSTRAINT fk_idempotency_keys_user FOREIGN KEY (user_id) REFERENCES users (id) ON DELETE RESTRICT
  ) ENGINE=InnoDB DEFAULT CHARSET=utf8mb4`,
  `CREATE TABLE number_series (
    buyer_organisation_id INT UNSIGNED NOT NULL,
    series VARCHAR(24) CHARACTER SET ascii NOT NULL,
    last INT UNSIGNED NOT NULL,
    PRIMARY KEY (buyer_organisation_id, series),
    CONSTRAINT fk_number_series_buyer FOREIGN KEY (buyer_organisation_id) REFERENCES organisations (id) ON DELETE RESTRICT
  ) ENGINE=InnoDB DEFAULT CHARSET=utf8mb4`,
  `CREATE TABLE suppliers (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    public_id CHAR(16) CHARACTER SET ascii NOT NULL,
    buyer_organisation_id INT UNSIGNED NOT NULL,
    name VARCHAR(120) COLLATE utf8mb4_bin NOT NULL,
    status ENUM('candidate', 'approved', 'blocked') NOT NULL DEFAULT 'candidate',
    supplier_organisation_id INT UNSIGNED NULL,
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY suppliers_public_id (public_id),
    UNIQUE KEY suppliers_buyer_name (buyer_organisation_id, name),
    UNIQUE KEY suppliers_buyer_supplier (buyer_organisation_id, supplier_organisation_id),
    CONSTRAINT fk_suppliers_buyer FOREIGN KEY (buyer_organisation_id) REFERENCES organisations (id) ON DELETE RESTRICT,
    CONSTRAINT fk_suppliers_supplier FOREIGN KEY (supplier_organisation_id) REFERENCES organisations (id) ON DELETE RESTRICT
  ) ENGINE=InnoDB DEFAULT CHARSET=utf8mb4`,
  `CREATE TABLE supplier_contacts (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    buyer_organisation_id INT UNSIGNED NOT NULL,
    supplier_id INT UNSIGNED NOT NULL,
    email VARCHAR(254) NOT NULL,
    name VARCHAR(120) NULL,
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY supplier_contacts_email (supplier_id, email),
    KEY supplier_contacts_buyer (buyer_organisation_id, email),
    CONSTRAINT fk_supplier_contacts_supplier FOREIGN KEY (supplier_id) REFERENCES suppliers (id) ON DELETE RESTRICT,
    CONSTRAINT fk_supplier_contacts_buyer FOREIGN KEY (buyer_organisation_id) REFERENCES organisations (id) ON DELETE RESTRICT
  ) ENGINE=InnoDB DEFAULT CHARSET=utf8mb4`,
);

export const down: Migration = statements(
  "DROP TABLE supplier_contacts",
  "DROP TABLE suppliers",
  "DROP TABLE number_series",
  "DROP TABLE idempotency_keys",
  "DROP TABLE sessions",
  "DROP TABLE users",
  "DROP TABLE organisations",
);
