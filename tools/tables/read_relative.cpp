// relative_rates.csv and mixtures.csv.
#include <map>

#include "tables/balance.hpp"
#include "tables/read_rates.hpp"

namespace halostep {
namespace {

constexpr Range kTemperature{100, 2000}, kLogU{0, 3, true}, kRatio{0, 1e6, true}, kFraction{0, 1};
constexpr double kMostOfMixture = 1.05;  // rounding of the parts may carry the sum above 1

void check_radical(const Row& row, Structures& structures, const char* molecule, const char* radical) {
  const auto* m = structures.in(row, molecule);
  const auto* r = structures.in(row, radical);
  if (m != nullptr && r != nullptr) radical_site(row, *m, *r);
}

RelativeRateRow read_ratio(const Row& row, SourceBook& sources, Structures& structures) {
  RelativeRateRow r;
  r.reagent = row.needed("reagent");
  r.molecule = row.text("molecule");
  r.reference_molecule = row.text("reference_molecule");
  r.radical = row.text("radical");
  r.reference_radical = row.text("reference_radical");
  r.ratio = row.needed_number("ratio_per_h", kRatio);
  r.t = row.needed_number("t", kTemperature);
  r.medium = row.needed("medium");
  r.u_log10 = row.needed_number("u_log10", kLogU);
  read_evidence(row, sources, r);
  r.fitted = row.word("use", words::use) == "fit";
  check_radical(row, structures, "molecule", "radical");
  check_radical(row, structures, "reference_molecule", "reference_radical");
  return r;
}

MixtureRow read_part(const Row& row, SourceBook& sources, Structures& structures) {
  MixtureRow r;
  r.reagent = row.needed("reagent");
  r.molecule = row.text("molecule");
  r.product = row.text("product");
  r.fraction = row.needed_number("fraction", kFraction);
  r.t = row.needed_number("t", kTemperature);
  r.medium = row.needed("medium");
  read_evidence(row, sources, r);
  r.fitted = row.word("use", words::use) == "fit";
  const auto* m = structures.in(row, "molecule");
  const auto* p = structures.in(row, "product");
  if (m != nullptr && p != nullptr && !is_monohalide(m->m, p->m)) {
    row.fault(fmt::format("product {} is not {} with one H replaced by a halogen", p->canonical, m->canonical));
  }
  return r;
}

/// Sums of the fractions of each mixture; the fault is told at its first line.
class MixtureSums {
 public:
  void add(const Row& row, const MixtureRow& r) {
    if (r.superseded) return;
    auto& sum = sums_[fmt::format("{} {} {} {} {}", r.reagent, r.molecule, r.t, r.medium, r.source)];
    if (sum.place.line == 0) sum.place = row.place();
    sum.fraction += r.fraction;
  }
  void tell(Faults& faults) const {
    std::map<int, double> bad;
    std::string file;
    for (const auto& [mixture, sum] : sums_) {
      if (sum.fraction <= kMostOfMixture) continue;
      bad[sum.place.line] = sum.fraction;
      file = sum.place.file;
    }
    for (const auto& [line, fraction] : bad) {
      faults.add(file, line, fmt::format("the fractions of this mixture sum to {:.3f}, more than 1", fraction));
    }
  }

 private:
  struct Sum {
    RowPlace place;
    double fraction = 0;
  };
  std::map<std::string, Sum> sums_;
};

}  // namespace

std::size_t read_relative_rates(const std::string& dir, Table& table, SourceBook& sources, Structures& structures,
                                Faults& faults) {
  const auto sheet =
      read_sheet(dir, "relative_rates.csv",
                 {"reagent", "molecule", "reference_molecule", "radical", "reference_radical", "ratio_per_h", "t",
                  "medium", "u_log10", "method", "provenance", "source", "status", "reason", "use", "note"},
                 faults);
  Duplicates duplicates;
  for (std::size_t i = 0; i < sheet.lines.size(); ++i) {
    const Row row(sheet, i, faults);
    auto r = read_ratio(row, sources, structures);
    duplicates.check(row, fmt::format("{} {} {} {} {} {} {} {} {}", r.reagent, r.molecule, r.reference_molecule,
                                      r.radical, r.reference_radical, r.ratio, r.t, r.medium, r.source));
    table.relative_rates.push_back(std::move(r));
  }
  return sheet.lines.size();
}

std::size_t read_mixtures(const std::string& dir, Table& table, SourceBook& sources, Structures& structures,
                          Faults& faults) {
  const auto sheet = read_sheet(dir, "mixtures.csv",
                                {"reagent", "molecule", "product", "fraction", "t", "medium", "method", "provenance",
                                 "source", "status", "reason", "use", "note"},
                                faults);
  Duplicates duplicates;
  MixtureSums sums;
  for (std::size_t i = 0; i < sheet.lines.size(); ++i) {
    const Row row(sheet, i, faults);
    auto r = read_part(row, sources, structures);
    duplicates.check(row, fmt::format("{} {} {} {} {} {} {}", r.reagent, r.molecule, r.product, r.fraction, r.t,
                                      r.medium, r.source));
    sums.add(row, r);
    table.mixtures.push_back(std::move(r));
  }
  sums.tell(faults);
  return sheet.lines.size();
}

}  // namespace halostep
