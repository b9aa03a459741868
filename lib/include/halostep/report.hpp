// From answers to text for people, JSON and CSV. Every function returns the whole document, ending in a newline.
#pragma once
#include <optional>
#include <span>
#include <string>
#include <vector>

#include "halostep/engine.hpp"
#include "halostep/error.hpp"
#include "halostep/quantity.hpp"
#include "halostep/tables.hpp"

namespace halostep {

/// What was read for one substrate. smiles and formula are empty when the input could not be read.
struct SubstrateHead {
  std::string input;                // as given
  std::string name;                 // title of the record, may be empty
  std::string smiles, formula;
  std::optional<Error> error;       // why there is no answer
};

struct BondsRecord {
  SubstrateHead head;
  std::vector<BondAnswer> bonds;
};

struct StepsRecord {
  SubstrateHead head;
  std::vector<StepAnswer> steps;    // all temperatures, one after the other
};

/// One elementary step asked for as reaction SMILES.
struct ReactionRecord {
  std::string input;
  std::optional<StepAnswer> step;
  std::optional<Error> error;
};

/// One halogen at one temperature, seen from the wanted site.
struct CompareRow {
  Halogen halogen = Halogen::Cl;
  double temperature = kReferenceTemperature;        // K
  double share = 0, share_low = 0, share_high = 0;   // of the wanted site, over C-H sites
  double k_cm3_s = 0;                                // of the wanted site, all its H
  bool only_rated = false;  // the other C-H sites have no rate and are left out of the share
  bool only_site = false;                            // no other C-H site was rated: the share says nothing
  std::optional<Quantity> dh_abstraction;            // kJ/mol, 298.15 K
  std::optional<Quantity> dh_net;                    // kJ/mol, 298.15 K
  bool extrapolated = false;
  bool propagates = true;                            // false: the chain does not carry itself
  bool hazardous = false;                            // one turn of the chain exceeds a C-C bond
  bool slow = false;                                 // an atom waits longer than a second at 1 mol/L substrate
  std::string verdict;                               // one line: what speaks for or against
};

/// One wanted site against halogens and temperatures.
struct Comparison {
  std::string wanted;                                // the radical of the wanted site, SMILES
  std::string chosen_by;                             // "site", "product", "weakest C-H"
  int h_count = 0;
  std::vector<CompareRow> rows;
  int best = -1;                                     // index into rows; -1: none propagates
  std::string why;                                   // why that one, or why none
};

struct OutcomeRecord {
  SubstrateHead head;
  std::vector<HalogenOutcome> halogens;              // halogens within each temperature
  std::optional<Comparison> comparison;
};

/// Net heat of one turn beyond which the chain is called hazardous: D(C-C) of alkanes is 350 to 377 kJ/mol.
inline constexpr double kChainHeatLimit = 350.0;
/// Abstraction endothermic by more than this does not carry a chain (iodine + alkanes: about 105 to 140 kJ/mol).
inline constexpr double kAbstractionLimit = 100.0;

/// Builds the comparison. `atom` is an atom of the wanted site; `steps` are those of the same substrate. With `only` the
/// best is sought among the rows of that halogen (the one in the wanted product); the others stand for comparison.
/// Errors: domain (the wanted site has no rate).
Result<Comparison> compare_site(std::span<const HalogenOutcome> outcomes, std::span<const StepAnswer> steps, int atom,
                                std::string chosen_by, std::optional<Halogen> only = std::nullopt);

struct TextOptions {
  EnergyUnit unit = EnergyUnit::kj;
  bool evidence = false;            // rows and corrections behind each answer
};

std::string bonds_text(const Table& table, std::span<const BondsRecord> records, const TextOptions& options);
std::string bonds_csv(const Table& table, std::span<const BondsRecord> records, EnergyUnit unit);
/// JSON, schema halostep.bonds/1 (docs/schema/bonds.json).
std::string bonds_json(const Table& table, std::span<const BondsRecord> records);

std::string steps_text(const Table& table, std::span<const StepsRecord> records,
                       std::span<const ReactionRecord> reactions, const TextOptions& options);
std::string steps_csv(const Table& table, std::span<const StepsRecord> records,
                      std::span<const ReactionRecord> reactions, EnergyUnit unit);
/// JSON, schema halostep.steps/1, or halostep.reactions/1 when there are reactions and no substrates.
std::string steps_json(const Table& table, std::span<const StepsRecord> records,
                       std::span<const ReactionRecord> reactions);

std::string outcome_text(const Table& table, std::span<const OutcomeRecord> records, const TextOptions& options);
/// One line per site; the column `best` marks the choice of a comparison.
std::string outcome_csv(const Table& table, std::span<const OutcomeRecord> records, EnergyUnit unit);
/// JSON, schema halostep.outcome/1.
std::string outcome_json(const Table& table, std::span<const OutcomeRecord> records);

enum class TableView { summary, rows, sources, show, models };
enum class RowKind { bonds, species, rates, relative_rates, mixtures };
struct TableQuery {
  TableView view = TableView::summary;
  RowKind kind = RowKind::bonds;    // for rows
  std::vector<int> bonds;           // for show: indices into Table::bonds
};
std::string table_text(const Table& table, const TableQuery& query, EnergyUnit unit);
std::string table_csv(const Table& table, const TableQuery& query, EnergyUnit unit);
/// JSON, schema halostep.table/1.
std::string table_json(const Table& table, const TableQuery& query);

/// "class: message (place)" in one line; control characters become blanks.
std::string error_line(const Error& error);
/// What to mind before anyone opens a cylinder; a screening tool does not replace qualified people.
std::string caution_text();

}  // namespace halostep
