// Speed over the NCI structures, on a long chain, and of opening the table. One thread; items are structures.
#include <benchmark/benchmark.h>
#include <fmt/format.h>
#include <openbabel/graphsym.h>
#include <openbabel/mol.h>
#include <openbabel/obconversion.h>
#include <openbabel/oberror.h>

#include <algorithm>
#include <cstdlib>
#include <sstream>

#include "halostep/engine.hpp"
#include "halostep/structure.hpp"
#include "structures.hpp"

namespace {

using namespace halostep;
using bench::accepted_molecules;
using bench::accepted_smiles;

constexpr BondOptions kNumbersOnly{.typed = false, .details = false};

const Engine& engine() {
  static const Engine e = [] {
    auto opened = Engine::open();
    if (!opened.ok()) {
      fmt::print(stderr, "{}\n", opened.error().message);
      std::exit(4);
    }
    return std::move(opened).value();
  }();
  return e;
}

void count_structures(benchmark::State& state) {
  state.SetItemsProcessed(state.iterations() * static_cast<std::int64_t>(accepted_smiles().size()));
}

// The yardstick: what any program on Open Babel pays before chemistry begins. Its message log is on unless a program
// stops it, and costs time even when nothing is printed.
void babel(benchmark::State& state, bool symmetry, bool log) {
  if (!log) OpenBabel::obErrorLog.StopLogging();
  std::ostringstream messages;
  auto* const stream = OpenBabel::obErrorLog.GetOutputStream();
  OpenBabel::obErrorLog.SetOutputStream(&messages);
  OpenBabel::OBConversion reader;
  reader.SetInFormat("smi");
  std::vector<unsigned> classes;
  for (auto _ : state) {
    for (const auto& text : accepted_smiles()) {
      OpenBabel::OBMol mol;
      reader.ReadString(&mol, text);
      if (symmetry) {
        OpenBabel::OBGraphSym graph(&mol);
        graph.GetSymmetry(classes);
        benchmark::DoNotOptimize(classes.data());
      }
      benchmark::DoNotOptimize(mol.NumAtoms());
    }
  }
  OpenBabel::obErrorLog.SetOutputStream(stream);  // the library's own reading listens to it
  OpenBabel::obErrorLog.StartLogging();
  count_structures(state);
}

void parse(benchmark::State& state) {
  for (auto _ : state) {
    for (const auto& text : accepted_smiles()) benchmark::DoNotOptimize(parse_smiles(text));
  }
  count_structures(state);
}

// One pass over molecules already read.
template <class Work>
void pass(benchmark::State& state, Work work) {
  for (auto _ : state) {
    for (const auto& m : accepted_molecules()) benchmark::DoNotOptimize(work(m));
  }
  count_structures(state);
}

// The job: bonds, steps for four halogens, selectivity.
auto study(const Molecule& m) { return engine().study(m, kAllHalogens, kReferenceTemperature, kNumbersOnly); }
auto bonds(const Molecule& m) { return engine().bonds(m, kNumbersOnly); }
std::string canonical(const Molecule& m) { return canonical_smiles(m); }

void parse_and_study(benchmark::State& state) {
  engine();
  for (auto _ : state) {
    for (const auto& text : accepted_smiles()) {
      const auto m = parse_smiles(text);
      benchmark::DoNotOptimize(study(m.value()));
    }
  }
  count_structures(state);
}

template <class Work>
void one(benchmark::State& state, const std::string& smiles, Work work) {
  engine();
  const auto m = parse_smiles(smiles);
  for (auto _ : state) benchmark::DoNotOptimize(work(m.value()));
  state.SetItemsProcessed(state.iterations());
}

void open_engine(benchmark::State& state) {
  for (auto _ : state) benchmark::DoNotOptimize(Engine::open());
}

// Of the repetitions; on a shared machine it scatters less than the median.
double fastest(const std::vector<double>& times) { return *std::min_element(times.begin(), times.end()); }

void cases() {
  const auto add = [](const char* name, auto run) {
    benchmark::RegisterBenchmark(name, run)->Unit(benchmark::kMillisecond)->ComputeStatistics("fastest", fastest);
  };
  add("nci/babel_parse", [](benchmark::State& s) { babel(s, false, false); });
  add("nci/babel_parse_symmetry", [](benchmark::State& s) { babel(s, true, false); });
  add("nci/babel_parse_log", [](benchmark::State& s) { babel(s, false, true); });
  add("nci/babel_parse_symmetry_log", [](benchmark::State& s) { babel(s, true, true); });
  add("nci/parse", parse);
  add("nci/parse_study", parse_and_study);
  add("nci/study", [](benchmark::State& s) { engine(), pass(s, study); });
  add("nci/bonds", [](benchmark::State& s) { engine(), pass(s, bonds); });
  add("nci/symmetry", [](benchmark::State& s) { pass(s, symmetry_classes); });
  add("nci/canonical", [](benchmark::State& s) { pass(s, canonical); });
  add("c4000/parse", [](benchmark::State& s) {
    const auto text = bench::alkane(4000);
    for (auto _ : s) benchmark::DoNotOptimize(parse_smiles(text));
  });
  // One long structure must not slow the reading of those after it.
  add("c4000/then_nci_parse", [](benchmark::State& s) {
    accepted_smiles();
    benchmark::DoNotOptimize(parse_smiles(bench::alkane(4000)));
    parse(s);
  });
  add("c4000/study", [](benchmark::State& s) { one(s, bench::alkane(4000), study); });
  add("c4000/symmetry", [](benchmark::State& s) { one(s, bench::alkane(4000), symmetry_classes); });
  add("c4000/canonical", [](benchmark::State& s) { one(s, bench::alkane(4000), canonical); });
  add("open_engine", open_engine);
}

}  // namespace

int main(int argc, char** argv) {
  cases();
  benchmark::Initialize(&argc, argv);
  if (benchmark::ReportUnrecognizedArguments(argc, argv)) return 1;
  benchmark::RunSpecifiedBenchmarks();
  benchmark::Shutdown();
  return 0;
}
