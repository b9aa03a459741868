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
inline constexpr int kTableLayout = 3;

struct SourceRow {
  std::string id, citation, doi, kind;
  int year = 0;
  std::string doi_basis;                   // how the DOI was obtained: read, rule, memory; empty without one
};

/// One piece of evidence for one bond; energies in kJ/mol.
struct BondRow {
  std::string molecule, radical, leaving;  // as curated SMILES; leaving is "[H]" for X-H bonds
  double d298 = 0, u = 0;
  std::string coverage, method, provenance, note, reason;
  bool superseded = false;
  int source = -1;                         // index into Table::sources
};

/// One bond: the value of the joint adjustment, in which its current rows and all that is tied to them speak.
struct BondEntry {
  std::string molecule, radical, leaving;  // canonical SMILES of this library, without stereo
  Quantity combined;                       // weighted mean of its own rows; u carries the spread (see docs/model.md)
  Quantity d298;                           // adjusted; `combined` where a part of the bond is not in the adjustment
  int at_molecule = -1, at_radical = -1, at_leaving = -1;  // indices into Table::adjusted, or -1
  std::vector<int> rows;                   // indices into Table::bond_rows (superseded ones included)
};

/// One piece of evidence for one species. Unknown numbers are absent.
struct SpeciesRow {
  std::string smiles, name, phase, coverage, method, provenance, note, reason;
  std::optional<double> dfh298, u, s298, cp298;  // kJ/mol, kJ/mol, J/(mol K), J/(mol K)
  bool superseded = false;
  int source = -1;
};

/// One species in one phase.
struct SpeciesEntry {
  std::string smiles, name, phase;         // canonical SMILES without stereo
  std::optional<Quantity> combined;        // kJ/mol; weighted mean of its own rows
  std::optional<Quantity> dfh298;          // kJ/mol; adjusted (gas), else `combined`
  int at = -1;                             // index into Table::adjusted, or -1
  std::optional<double> s298, cp298;       // J mol-1 K-1
  double u_s298 = 0, u_cp298 = 0;          // standard uncertainties by the kind of the row (see docs/model.md)
  std::vector<int> rows;
};

/// Covariance of one adjusted enthalpy with another.
struct AdjustedLink {
  int other = 0;                           // index into Table::adjusted, not above the owner's
  double covariance = 0;                   // (kJ/mol)^2
};

/// One gas species of the joint adjustment (equations: docs/model.md), 298.15 K, kJ/mol.
struct AdjustedSpecies {
  std::string key;                         // species_key(): radicals up to resonance
  std::string smiles;                      // canonical, without stereo
  double dfh298 = 0;
  int datum = -1;                          // where only differences are known: index of the molecule taken as zero
  double weight = 0;                       // change of dfh298 per change of that zero
  std::vector<AdjustedLink> links;         // lower triangle with the variance; correlations below 1e-6 are left out
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
  std::vector<AdjustedSpecies> adjusted;   // of one joint adjustment of all enthalpies
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
