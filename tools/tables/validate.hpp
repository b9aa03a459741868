// How well the engine meets molecules it has not seen.
#pragma once
#include <string>

#include "halostep/engine.hpp"
#include "tables/hold_out.hpp"
#include "tables/scores.hpp"

namespace halostep {

/// Everything judged, over all folds.
struct Validation {
  Section bonds, halides, sources, rates, mixtures;
};

/// One fold: `engine` has not seen its molecules, `full` has the values that judge.
struct FoldView {
  const Table& full;
  const Engine& engine;
  Folds& folds;
  int fold = 0;
};

void judge_bonds(const FoldView& v, Validation& out);
/// Measured bonds with several sources: each source against what the others combine to.
void judge_sources(const Table& t, Section& s);
void judge_rates(const FoldView& v, Validation& out);
void judge_mixtures(const FoldView& v, Validation& out);

/// Prints the report; writes it to the files named (empty: not). Exit code of the command.
int validate(const Table& table, const std::string& markdown, const std::string& json);

}  // namespace halostep
