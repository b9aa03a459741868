// How well the engine meets molecules it has not seen.
#pragma once
#include <functional>
#include <map>
#include <optional>
#include <string>
#include <vector>

#include "halostep/engine.hpp"
#include "tables/hold_out.hpp"
#include "tables/scores.hpp"

namespace halostep {

/// One rate coefficient judged.
struct JudgedRate {
  std::string carrier;
  double error = 0, u = 0;  // log10; u of the model
  bool marked = false;      // as extrapolated
};

/// Everything judged, over all folds.
struct Validation {
  Section bonds, halides, sources, rates, mixtures, temperatures, ratios, media, reverse, forms;
  std::vector<JudgedRate> rows;
  std::vector<double> share_z;  // errors of shares in their deviations
  std::map<std::string, std::vector<double>> ranges;  // share of pairs ordered right, by class: 1 or 0
};

/// One fold: `engine` has not seen its molecules, `full` has the values that judge.
struct FoldView {
  const Table& full;
  const Engine& engine;
  Folds& folds;
  int fold = 0;
};

using FitFunction = std::function<Result<std::vector<FittedModel>>(const Table&)>;

/// For each fold: the table without it, its models fitted anew, an engine over them, and `judge` asked. False (said on
/// stderr) when a fit fails.
bool each_fold(const Table& table, Folds folds, const FitFunction& fit, const std::function<void(const FoldView&)>& judge);

void judge_bonds(const FoldView& v, Validation& out);
/// Measured bonds with several sources: each source against what the others combine to.
void judge_sources(const Table& t, Section& s);
void judge_rates(const FoldView& v, Validation& out);
void judge_mixtures(const FoldView& v, Validation& out);
void judge_reverse(const FoldView& v, const Engine& whole, Validation& out);
void judge_forms(const FoldView& v, Validation& out);
/// Molecules whose bonds stay while their rates alone are left out.
bool judge_alone(const Table& table, Validation& out);
/// What is said of all rows together.
void finish_rates(const Table& table, Validation& out);
/// Relative rates per H.
void judge_ratios(const FoldView& v, Validation& out);
/// Complexing solvents: each row left out in turn of its solvent's fit; `table` holds the models of all rows. Errors: table.
std::optional<Error> judge_media(const Table& table, Validation& out);
/// The carrier atom of a reagent, and the medium in which a row is judged.
std::optional<Halogen> carrier_of(const std::string& reagent);
OutcomeOptions judged_conditions(const Engine& engine, const Molecule& m, const std::string& medium, const std::string& reagent);
/// Why a composition does not judge, or nullptr.
const char* not_measured(const MixtureRow& r);
/// Carbons and hydrogens only.
bool is_hydrocarbon(const Molecule& m);
/// Naive rate per H, relative: one factor per carbon class.
double naive_per_h(Halogen x, const Molecule& m, int atom);

/// Measured mixtures whose molecule alone is held out, its kin in; one fit of everything per molecule.
bool judge_alone_mixtures(const Table& table, Validation& out);

/// Files to write; empty: not.
struct ValidateFiles {
  std::string markdown, json, plot, rows;
};

/// Prints the report and writes the files. Exit code of the command.
int validate(const Table& table, const ValidateFiles& files);

}  // namespace halostep
