CREATE TABLE IF NOT EXISTS people (
  id INT NOT NULL AUTO_INCREMENT PRIMARY KEY,
  email VARCHAR(254) NOT NULL,
  name VARCHAR(80) NOT NULL,
  role ENUM('reader', 'editor', 'lead') NOT NULL,
  password_hash VARCHAR(255) NOT NULL,
  disabled_at DATETIME(3) NULL,
  created_at DATETIME(3) NOT NULL,
  UNIQUE KEY people_email (email),
  CONSTRAINT people_email_lower CHECK (email = LOWER(email) COLLATE utf8mb4_bin),
  CONSTRAINT people_name_given CHECK (CHAR_LENGTH(name) > 0)
) ENGINE = InnoDB DEFAULT CHARSET = utf8mb4 COLLATE = utf8mb4_unicode_ci;
--> statement-breakpoint
CREATE TABLE IF NOT EXISTS sessions (
  id_hash CHAR(64) CHARACTER SET ascii COLLATE ascii_bin NOT NULL PRIMARY KEY,
  person_id INT NOT NULL,
  created_at DATETIME(3) NOT NULL,
  seen_at DATETIME(3) NOT NULL,
  expires_at DATETIME(3) NOT NULL,
  address VARCHAR(45) NOT NULL,
  agent VARCHAR(200) NOT NULL,
  KEY sessions_of_person (person_id),
  KEY sessions_by_end (expires_at),
  CONSTRAINT sessions_person FOREIGN KEY (person_id) REFERENCES people (id) ON DELETE CASCADE
) ENGINE = InnoDB DEFAULT CHARSET = utf8mb4 COLLATE = utf8mb4_unicode_ci;
--> statement-breakpoint
CREATE TABLE IF NOT EXISTS rate_limits (
  `key` VARCHAR(255) CHARACTER SET ascii COLLATE ascii_bin NOT NULL PRIMARY KEY,
  points INT NOT NULL DEFAULT 0,
  expire BIGINT UNSIGNED NULL,
  KEY rate_limits_by_end (expire)
) ENGINE = InnoDB DEFAULT CHARSET = utf8mb4 COLLATE = utf8mb4_unicode_ci;
--> statement-breakpoint
CREATE TABLE IF NOT EXISTS counters (
  name VARCHAR(8) CHARACTER SET ascii COLLATE ascii_bin NOT NULL PRIMARY KEY,
  value INT NOT NULL,
  CONSTRAINT counters_not_negative CHECK (value >= 0)
) ENGINE = InnoDB DEFAULT CHARSET = utf8mb4 COLLATE = utf8mb4_unicode_ci;
--> statement-breakpoint
INSERT IGNORE INTO counters (name, value) VALUES ('S', 0);
--> statement-breakpoint
CREATE TABLE IF NOT EXISTS idempotency_keys (
  person_id INT NOT NULL,
  client_key VARCHAR(80) CHARACTER SET ascii COLLATE ascii_bin NOT NULL,
  request_hash CHAR(64) CHARACTER SET ascii COLLATE ascii_bin NOT NULL,
  worker CHAR(36) CHARACTER SET ascii COLLATE ascii_bin NOT NULL,
  work_until DATETIME(3) NOT NULL,
  status SMALLINT NULL,
  answer LONGTEXT NULL,
  created_at DATETIME(3) NOT NULL,
  PRIMARY KEY (person_id, client_key),
  KEY idempotency_keys_by_age (created_at),
  CONSTRAINT idempotency_keys_person FOREIGN KEY (person_id) REFERENCES people (id) ON DELETE CASCADE
) ENGINE = InnoDB DEFAULT CHARSET = utf8mb4 COLLATE = utf8mb4_unicode_ci;
--> statement-breakpoint
CREATE TABLE IF NOT EXISTS blocks (
  id INT NOT NULL AUTO_INCREMENT PRIMARY KEY,
  code VARCHAR(40) CHARACTER SET ascii COLLATE ascii_general_ci NOT NULL,
  state ENUM('active', 'retired') NOT NULL DEFAULT 'active',
  created_at DATETIME(3) NOT NULL,
  UNIQUE KEY blocks_code (code),
  CONSTRAINT blocks_code_form CHECK (code REGEXP '^[a-z0-9]+(-[a-z0-9]+)*$')
) ENGINE = InnoDB DEFAULT CHARSET = utf8mb4 COLLATE = utf8mb4_unicode_ci;
--> statement-breakpoint
CREATE TABLE IF NOT EXISTS revisions (
  id INT NOT NULL AUTO_INCREMENT PRIMARY KEY,
  block_id INT NOT NULL,
  number INT NOT NULL,
  format TINYINT NOT NULL,
  title VARCHAR(120) NOT NULL,
  `function` ENUM('low-pass', 'high-pass', 'band-pass', 'band-stop', 'all-pass', 'shelving', 'gain') NOT NULL,
  topology VARCHAR(60) NOT NULL,
  `order` TINYINT NOT NULL,
  tags JSON NOT NULL,
  aliases JSON NOT NULL,
  owner VARCHAR(80) NOT NULL,
  summary VARCHAR(300) NOT NULL,
  source MEDIUMTEXT NOT NULL,
  source_hash CHAR(64) CHARACTER SET ascii COLLATE ascii_bin NOT NULL,
  author_id INT NOT NULL,
  author_name VARCHAR(80) NOT NULL,
  change_note VARCHAR(2000) NOT NULL,
  status ENUM('in review', 'returned', 'approved', 'superseded', 'withdrawn') NOT NULL,
  submitted_at DATETIME(3) NOT NULL,
  approved_by_id INT NULL,
  approved_by_name VARCHAR(80) NULL,
  approved_by_role ENUM('reader', 'editor', 'lead') NULL,
  approved_at DATETIME(3) NULL,
  self_check JSON NOT NULL,
  engine_version VARCHAR(40) NOT NULL,
  withdrawn_reason VARCHAR(2000) NULL,
  sketch_db JSON NOT NULL,
  search_title VARCHAR(200) NOT NULL,
  search_words TEXT NOT NULL,
  search_notes MEDIUMTEXT NOT NULL,
  search_parts TEXT NOT NULL,
  approved_of INT AS (IF(status = 'approved', block_id, NULL)) VIRTUAL,
  UNIQUE KEY revisions_number (block_id, number),
  UNIQUE KEY revisions_one_approved (approved_of),
  KEY revisions_by_status (status),
  FULLTEXT KEY revisions_search_title (search_title),
  FULLTEXT KEY revisions_search_words (search_words),
  FULLTEXT KEY revisions_search_notes (search_notes),
  FULLTEXT KEY revisions_search_parts (search_parts),
  CONSTRAINT revisions_block FOREIGN KEY (block_id) REFERENCES blocks (id),
  CONSTRAINT revisions_author FOREIGN KEY (author_id) REFERENCES people (id),
  CONSTRAINT revisions_approver FOREIGN KEY (approved_by_id) REFERENCES people (id),
  CONSTRAINT revisions_number_from_one CHECK (number >= 1),
  CONSTRAINT revisions_order_range CHECK (`order` BETWEEN 0 AND 20),
  CONSTRAINT revisions_approval_named CHECK (
    status NOT IN ('approved', 'superseded')
    OR (approved_by_id IS NOT NULL AND approved_by_name IS NOT NULL
        AND approved_by_role IS NOT NULL AND approved_at IS NOT NULL)
  ),
  CONSTRAINT revisions_not_own CHECK (approved_by_id IS NULL OR approved_by_id <> author_id),
  CONSTRAINT revisions_by_lead CHECK (approved_by_role IS NULL OR approved_by_role = 'lead'),
  CONSTRAINT revisions_withdrawal_reasoned CHECK (status <> 'withdrawn' OR withdrawn_reason IS NOT NULL)
) ENGINE = InnoDB DEFAULT CHARSET = utf8mb4 COLLATE = utf8mb4_unicode_ci;
--> statement-breakpoint
CREATE TABLE IF NOT EXISTS block_links (
  id INT NOT NULL AUTO_INCREMENT PRIMARY KEY,
  from_revision_id INT NOT NULL,
  to_code VARCHAR(40) CHARACTER SET ascii COLLATE ascii_general_ci NOT NULL,
  to_revision INT NULL,
  KEY block_links_to (to_code),
  CONSTRAINT block_links_from FOREIGN KEY (from_revision_id) REFERENCES revisions (id),
  CONSTRAINT block_links_revision_from_one CHECK (to_revision IS NULL OR to_revision >= 1)
) ENGINE = InnoDB DEFAULT CHARSET = utf8mb4 COLLATE = utf8mb4_unicode_ci;
--> statement-breakpoint
CREATE TABLE IF NOT EXISTS sizings (
  number INT NOT NULL PRIMARY KEY,
  block_id INT NOT NULL,
  revision_id INT NOT NULL,
  title_block JSON NOT NULL,
  asked JSON NOT NULL,
  outcome JSON NOT NULL,
  conditions JSON NOT NULL,
  op_amps JSON NOT NULL,
  limits_not_kept JSON NOT NULL,
  note VARCHAR(2000) NOT NULL,
  reason VARCHAR(500) NOT NULL,
  response JSON NOT NULL,
  phase_rad JSON NOT NULL,
  test_table JSON NOT NULL,
  self_check JSON NOT NULL,
  engine_version VARCHAR(40) NOT NULL,
  saved_by_id INT NOT NULL,
  saved_by_name VARCHAR(80) NOT NULL,
  saved_at DATETIME(3) NOT NULL,
  client_key VARCHAR(80) CHARACTER SET ascii COLLATE ascii_bin NULL,
  UNIQUE KEY sizings_client_key (saved_by_id, client_key),
  KEY sizings_of_block (block_id, number),
  KEY sizings_of_revision (revision_id),
  CONSTRAINT sizings_block FOREIGN KEY (block_id) REFERENCES blocks (id),
  CONSTRAINT sizings_revision FOREIGN KEY (revision_id) REFERENCES revisions (id),
  CONSTRAINT sizings_person FOREIGN KEY (saved_by_id) REFERENCES people (id),
  CONSTRAINT sizings_number_from_one CHECK (number >= 1)
) ENGINE = InnoDB DEFAULT CHARSET = utf8mb4 COLLATE = utf8mb4_unicode_ci;
--> statement-breakpoint
CREATE TABLE IF NOT EXISTS seed_marks (
  file VARCHAR(120) CHARACTER SET utf8mb4 COLLATE utf8mb4_bin NOT NULL PRIMARY KEY,
  file_hash CHAR(64) CHARACTER SET ascii COLLATE ascii_bin NOT NULL,
  loaded_at DATETIME(3) NOT NULL
) ENGINE = InnoDB DEFAULT CHARSET = utf8mb4 COLLATE = utf8mb4_unicode_ci;
