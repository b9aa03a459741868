-- Layout 3 of halostep.sqlite. The CSV files are the source; the table compiler fills this schema.
-- Energies in kJ/mol (298.15 K), entropies and heat capacities in J mol-1 K-1, temperatures in K.
-- `id` is the 0-based row number of the arrays the library loads; `source` refers to source.id.

CREATE TABLE meta (
  key   TEXT NOT NULL PRIMARY KEY,
  value TEXT NOT NULL
) STRICT, WITHOUT ROWID;

CREATE TABLE source (
  id        INTEGER PRIMARY KEY,
  name      TEXT NOT NULL UNIQUE CHECK (length(name) > 0 AND name NOT GLOB '*[^a-z0-9_-]*'),
  citation  TEXT NOT NULL CHECK (length(citation) > 0),
  doi       TEXT NOT NULL CHECK (doi = '' OR doi GLOB '10.[0-9][0-9][0-9][0-9]*/?*'),
  doi_basis TEXT NOT NULL CHECK (doi_basis IN ('', 'read', 'rule', 'memory') AND (doi = '') = (doi_basis = '')),
  kind      TEXT NOT NULL CHECK (kind IN ('measurement', 'evaluation', 'compilation', 'textbook', 'computation',
                                          'practice')),
  year      INTEGER NOT NULL CHECK (year = 0 OR year BETWEEN 1850 AND 2100) -- 0: not known
) STRICT;

CREATE TABLE bond_row (
  id         INTEGER PRIMARY KEY,
  molecule   TEXT NOT NULL CHECK (length(molecule) > 0),
  radical    TEXT NOT NULL CHECK (length(radical) > 0),
  leaving    TEXT NOT NULL CHECK (length(leaving) > 0),
  d298       REAL NOT NULL CHECK (d298 BETWEEN 50 AND 1200),
  u          REAL NOT NULL CHECK (u > 0 AND u <= 40),
  coverage   TEXT NOT NULL CHECK (coverage IN ('1s', '2s', '95%', 'none', 'unstated')),
  method     TEXT NOT NULL CHECK (method IN ('measured', 'evaluated', 'derived', 'computed')),
  provenance TEXT NOT NULL CHECK (provenance IN ('read', 'memory')),
  note       TEXT NOT NULL,
  reason     TEXT NOT NULL,
  superseded INTEGER NOT NULL CHECK (superseded IN (0, 1)),
  source     INTEGER NOT NULL REFERENCES source (id)
) STRICT;

CREATE TABLE bond (
  id       INTEGER PRIMARY KEY,
  molecule TEXT NOT NULL,
  radical  TEXT NOT NULL,
  leaving  TEXT NOT NULL,
  combined REAL NOT NULL CHECK (combined BETWEEN 50 AND 1200), -- weighted mean of its own rows
  combined_u REAL NOT NULL CHECK (combined_u > 0),
  d298     REAL NOT NULL CHECK (d298 BETWEEN 50 AND 1200),     -- of the joint adjustment
  u        REAL NOT NULL CHECK (u > 0),
  at_molecule INTEGER NOT NULL, -- adjusted.id, or -1
  at_radical  INTEGER NOT NULL,
  at_leaving  INTEGER NOT NULL,
  UNIQUE (molecule, radical, leaving)
) STRICT;

-- One joint adjustment of all enthalpies: values and covariance.
CREATE TABLE adjusted (
  id     INTEGER PRIMARY KEY,
  key    TEXT NOT NULL UNIQUE,
  smiles TEXT NOT NULL,
  dfh298 REAL NOT NULL,
  datum  INTEGER NOT NULL, -- -1, or the species whose enthalpy was taken as zero: only differences to it are known
  weight REAL NOT NULL
) STRICT;

CREATE TABLE adjusted_link (
  species    INTEGER NOT NULL REFERENCES adjusted (id),
  other      INTEGER NOT NULL CHECK (other BETWEEN 0 AND species),
  covariance REAL NOT NULL,
  PRIMARY KEY (species, other)
) STRICT, WITHOUT ROWID;

CREATE TABLE bond_member (
  bond INTEGER NOT NULL REFERENCES bond (id),
  row  INTEGER NOT NULL UNIQUE REFERENCES bond_row (id),
  PRIMARY KEY (bond, row)
) STRICT, WITHOUT ROWID;

CREATE TABLE species_row (
  id         INTEGER PRIMARY KEY,
  smiles     TEXT NOT NULL CHECK (length(smiles) > 0),
  name       TEXT NOT NULL,
  phase      TEXT NOT NULL CHECK (phase IN ('g', 'l', 'c')),
  dfh298     REAL CHECK (dfh298 BETWEEN -3000 AND 1500),
  u          REAL CHECK (u >= 0),
  s298       REAL CHECK (s298 > 0),
  cp298      REAL CHECK (cp298 > 0),
  coverage   TEXT NOT NULL CHECK (coverage IN ('', '1s', '2s', '95%', 'none', 'unstated')),
  method     TEXT NOT NULL CHECK (method IN ('measured', 'evaluated', 'derived', 'computed')),
  provenance TEXT NOT NULL CHECK (provenance IN ('read', 'memory')),
  note       TEXT NOT NULL,
  reason     TEXT NOT NULL,
  superseded INTEGER NOT NULL CHECK (superseded IN (0, 1)),
  source     INTEGER NOT NULL REFERENCES source (id),
  CHECK ((dfh298 IS NULL) = (u IS NULL)),
  CHECK (dfh298 IS NOT NULL OR s298 IS NOT NULL OR cp298 IS NOT NULL)
) STRICT;

CREATE TABLE species (
  id     INTEGER PRIMARY KEY,
  smiles TEXT NOT NULL,
  name   TEXT NOT NULL,
  phase  TEXT NOT NULL CHECK (phase IN ('g', 'l', 'c')),
  combined   REAL,
  combined_u REAL CHECK (combined_u >= 0),
  dfh298 REAL,
  u      REAL CHECK (u >= 0),
  at     INTEGER NOT NULL, -- adjusted.id, or -1
  s298   REAL CHECK (s298 > 0),
  cp298  REAL CHECK (cp298 > 0),
  u_s298  REAL NOT NULL CHECK (u_s298 >= 0),
  u_cp298 REAL NOT NULL CHECK (u_cp298 >= 0),
  UNIQUE (smiles, phase),
  CHECK ((dfh298 IS NULL) = (u IS NULL))
) STRICT;

CREATE TABLE species_member (
  species INTEGER NOT NULL REFERENCES species (id),
  row     INTEGER NOT NULL UNIQUE REFERENCES species_row (id),
  PRIMARY KEY (species, row)
) STRICT, WITHOUT ROWID;

-- Abstraction rows have carrier, molecule and radical; all other steps a reaction.
CREATE TABLE rate (
  id         INTEGER PRIMARY KEY,
  carrier    TEXT NOT NULL CHECK (carrier IN ('', 'F', 'Cl', 'Br', 'I')),
  molecule   TEXT NOT NULL,
  radical    TEXT NOT NULL,
  reaction   TEXT NOT NULL,
  type       TEXT NOT NULL CHECK (length(type) > 0),
  unit       TEXT NOT NULL CHECK (unit IN ('cm3', 'cm6', 's-1')),
  h_count    INTEGER NOT NULL CHECK (h_count BETWEEN 0 AND 200),
  a          REAL CHECK (a > 0),
  n          REAL NOT NULL CHECK (n BETWEEN -10 AND 10),
  ea         REAL CHECK (ea BETWEEN -50 AND 600),
  k298       REAL CHECK (k298 > 0),
  t_min      REAL CHECK (t_min > 0),
  t_max      REAL CHECK (t_max >= t_min),
  u_log10    REAL NOT NULL CHECK (u_log10 BETWEEN 0 AND 3),
  coverage   TEXT NOT NULL CHECK (coverage IN ('1s', '2s', '95%', 'none', 'unstated')),
  method     TEXT NOT NULL CHECK (method IN ('measured', 'evaluated', 'derived', 'computed')),
  provenance TEXT NOT NULL CHECK (provenance IN ('read', 'memory')),
  note       TEXT NOT NULL,
  reason     TEXT NOT NULL,
  superseded INTEGER NOT NULL CHECK (superseded IN (0, 1)),
  fitted     INTEGER NOT NULL CHECK (fitted IN (0, 1)),
  source     INTEGER NOT NULL REFERENCES source (id),
  CHECK ((carrier = '') <> (reaction = ''))
) STRICT;

CREATE TABLE relative_rate (
  id                 INTEGER PRIMARY KEY,
  reagent            TEXT NOT NULL CHECK (length(reagent) > 0),
  molecule           TEXT NOT NULL,
  reference_molecule TEXT NOT NULL,
  radical            TEXT NOT NULL,
  reference_radical  TEXT NOT NULL,
  medium             TEXT NOT NULL CHECK (length(medium) > 0),
  ratio              REAL NOT NULL CHECK (ratio > 0),
  t                  REAL NOT NULL CHECK (t BETWEEN 100 AND 2000),
  u_log10            REAL NOT NULL CHECK (u_log10 BETWEEN 0 AND 3),
  method             TEXT NOT NULL CHECK (method IN ('measured', 'evaluated', 'derived', 'computed')),
  provenance         TEXT NOT NULL CHECK (provenance IN ('read', 'memory')),
  note               TEXT NOT NULL,
  reason             TEXT NOT NULL,
  superseded         INTEGER NOT NULL CHECK (superseded IN (0, 1)),
  fitted             INTEGER NOT NULL CHECK (fitted IN (0, 1)),
  source             INTEGER NOT NULL REFERENCES source (id)
) STRICT;

CREATE TABLE mixture (
  id         INTEGER PRIMARY KEY,
  reagent    TEXT NOT NULL CHECK (length(reagent) > 0),
  molecule   TEXT NOT NULL,
  product    TEXT NOT NULL,
  medium     TEXT NOT NULL CHECK (length(medium) > 0),
  fraction   REAL NOT NULL CHECK (fraction BETWEEN 0 AND 1),
  t          REAL NOT NULL CHECK (t BETWEEN 100 AND 2000),
  method     TEXT NOT NULL CHECK (method IN ('measured', 'evaluated', 'derived', 'computed')),
  provenance TEXT NOT NULL CHECK (provenance IN ('read', 'memory')),
  note       TEXT NOT NULL,
  reason     TEXT NOT NULL,
  superseded INTEGER NOT NULL CHECK (superseded IN (0, 1)),
  fitted     INTEGER NOT NULL CHECK (fitted IN (0, 1)),
  source     INTEGER NOT NULL REFERENCES source (id)
) STRICT;

CREATE TABLE model (
  id         INTEGER PRIMARY KEY,
  name       TEXT NOT NULL UNIQUE CHECK (length(name) > 0),
  -- n x n doubles, row-major, little-endian IEEE 754
  covariance BLOB NOT NULL CHECK (length(covariance) % 8 = 0)
) STRICT;

CREATE TABLE model_parameter (
  model    INTEGER NOT NULL REFERENCES model (id),
  position INTEGER NOT NULL CHECK (position >= 0),
  name     TEXT NOT NULL CHECK (length(name) > 0),
  value    REAL NOT NULL,
  support  INTEGER NOT NULL CHECK (support >= 0),
  PRIMARY KEY (model, position),
  UNIQUE (model, name)
) STRICT, WITHOUT ROWID;

CREATE TABLE model_setting (
  model    INTEGER NOT NULL REFERENCES model (id),
  position INTEGER NOT NULL CHECK (position >= 0),
  name     TEXT NOT NULL CHECK (length(name) > 0),
  value    REAL NOT NULL,
  PRIMARY KEY (model, position)
) STRICT, WITHOUT ROWID;

-- Rules that take more than one column; each message states the rule.

CREATE TRIGGER bond_row_superseded BEFORE INSERT ON bond_row WHEN NEW.superseded = 1 AND NEW.reason = ''
BEGIN SELECT RAISE(ABORT, 'a superseded bond row must give its reason'); END;

CREATE TRIGGER species_row_superseded BEFORE INSERT ON species_row WHEN NEW.superseded = 1 AND NEW.reason = ''
BEGIN SELECT RAISE(ABORT, 'a superseded species row must give its reason'); END;

CREATE TRIGGER rate_superseded BEFORE INSERT ON rate WHEN NEW.superseded = 1 AND NEW.reason = ''
BEGIN SELECT RAISE(ABORT, 'a superseded rate row must give its reason'); END;

CREATE TRIGGER relative_rate_superseded BEFORE INSERT ON relative_rate WHEN NEW.superseded = 1 AND NEW.reason = ''
BEGIN SELECT RAISE(ABORT, 'a superseded relative rate must give its reason'); END;

CREATE TRIGGER mixture_superseded BEFORE INSERT ON mixture WHEN NEW.superseded = 1 AND NEW.reason = ''
BEGIN SELECT RAISE(ABORT, 'a superseded mixture row must give its reason'); END;

CREATE TRIGGER rate_number BEFORE INSERT ON rate WHEN NEW.a IS NULL AND NEW.k298 IS NULL AND NEW.ea IS NULL
BEGIN SELECT RAISE(ABORT, 'a rate row must give a, k298 or ea'); END;

CREATE TRIGGER rate_show BEFORE INSERT ON rate WHEN NEW.carrier <> '' AND NEW.fitted = 0 AND NEW.note = ''
BEGIN SELECT RAISE(ABORT, 'an abstraction rate that is shown and not fitted must say why in its note'); END;

CREATE TRIGGER bond_row_frozen BEFORE DELETE ON bond_row
BEGIN SELECT RAISE(ABORT, 'rows are superseded, never deleted'); END;

CREATE TRIGGER species_row_frozen BEFORE DELETE ON species_row
BEGIN SELECT RAISE(ABORT, 'rows are superseded, never deleted'); END;

CREATE TRIGGER rate_frozen BEFORE DELETE ON rate
BEGIN SELECT RAISE(ABORT, 'rows are superseded, never deleted'); END;
