// The curated table: rows, sources, fitted parameters. Loaded once into plain arrays; immutable.
#pragma once
#include <cstdint>
#include <optional>
#include <string>
#include <string_view>
#include <unordered_map>
#include <vector>

#include "halostep/error.hpp"
#include "halostep/quantity.hpp"

namespace halostep {

/// Version of the table's layout this library reads.
inline constexpr int kTableLayout = 1;

struct SourceRow {
  std::string id, citation, doi, kind;
  int year = 0;
};

/// One piece of evidence for one bond; energies in kJ/mol.
struct BondRow {
  std::string molecule, radical, leaving;  // as curated SMILES; leaving is "[H]" for X-H bonds
  double d298 = 0, u = 0;
  std::string coverage, method, provenance, note, reason;
  bool superseded = false;
  int source = -1;                         // index into Table::sources
};

/// One bond: the combined value of its current rows.
struct BondEntry {
  std::string molecule, radical, leaving;  // canonical SMILES of this library, without stereo
  Quantity d298;                           // weighted mean; u carries the spread (see docs/model.md)
  std::vector<int> rows;                   // indices into Table::bond_rows (superseded ones included)
};

/// One piece of evidence for one species. Unknown numbers are absent.
struct SpeciesRow {
  std::string smiles, name, phase, coverage, method, provenance, note, reason;
  std::optional<double> dfh298, u, s298, cp298;  // kJ/mol, kJ/mol, J/(mol K), J/(mol K)
  bool superseded = false;
  int source = -1;
};

/// One species in one phase: combined values.
struct SpeciesEntry {
  std::string smiles, name, phase;         // canonical SMILES without stereo
  std::optional<Quantity> dfh298;          // kJ/mol
  std::optional<double> s298, cp298;       // J mol-1 K-1
  std::vector<int> rows;
};

/// k(T) = a (T/298)^n exp(-ea/RT); units as in docs/tables.md.
struct RateRow {
  std::string carrier, molecule, radical;  // abstraction; radical "total" for all sites together
  std::string reaction, type, unit;        // other steps
  int h_count = 0;
  std::optional<double> a, ea, k298, t_min, t_max;
  double n = 0, u_log10 = 0;
  std::string coverage, method, provenance, note, reason;
  bool superseded = false, fitted = false;
  int source = -1;
};

/// Relative rate per H of two sites, or of a site and a reference molecule's site.
struct RelativeRateRow {
  std::string reagent, molecule, reference_molecule, radical, reference_radical, medium;
  double ratio = 0, t = 0, u_log10 = 0;
  std::string method, provenance, note, reason;
  bool superseded = false, fitted = false;
  int source = -1;
};

/// One product of a measured monohalide mixture.
struct MixtureRow {
  std::string reagent, molecule, product, medium;
  double fraction = 0, t = 0;
  std::string method, provenance, note, reason;
  bool superseded = false, fitted = false;
  int source = -1;
};

/// A fitted model: named parameters with their covariance (row-major, n x n) and named settings.
struct FittedModel {
  std::string name;                        // "bonds", "substitution.Cl", "kinetics.Br", ...
  std::vector<std::string> parameters;
  std::vector<double> values;
  std::vector<int> support;                // rows of evidence that touch the parameter
  std::vector<double> covariance;
  std::vector<std::pair<std::string, double>> settings;  // scales, limits, residual deviation
};

struct Table {
  int layout = 0;
  std::string content_hash;                // SHA-256 of the canonical dump of all rows
  std::string origin;                      // "built-in" or the path
  std::vector<SourceRow> sources;
  std::vector<BondRow> bond_rows;
  std::vector<BondEntry> bonds;
  std::vector<SpeciesRow> species_rows;
  std::vector<SpeciesEntry> species;
  std::vector<RateRow> rates;              // abstraction and other steps
  std::vector<RelativeRateRow> relative_rates;
  std::vector<MixtureRow> mixtures;
  std::vector<FittedModel> models;
};

/// Environment variable that overrides the built-in table.
inline constexpr const char* kTableVariable = "HALOSTEP_TABLE";

/// Opens a table read-only and checks layout version, SQLite integrity and content hash.
/// Order of search: `path` if not empty, then $HALOSTEP_TABLE, then the table built into the library.
/// Errors: table (the message names path, found, wanted, and where else was looked), io.
Result<Table> open_table(const std::string& path = {});

}  // namespace halostep
