#include "tables/read_rates.hpp"

#include <cmath>

#include "tables/balance.hpp"

namespace halostep {
namespace {

constexpr double kReference = 298.0;  // K, of k298 and of the T ratio in k(T)
constexpr double kAgreement = 0.10;
constexpr Range kBarrier{-50, 600}, kExponent{-10, 10}, kTemperature{50, 5000}, kLogU{0, 3, true};

/// Upper ends far above what is possible: collision rates for two and three bodies, molecular vibration for one.
Range prefactor(const std::string& unit) {
  if (unit == "cm6") return {0, 1e-22, true};
  if (unit == "s-1") return {0, 1e19, true};
  return {0, 1e-4, true};
}

void read_coefficient(const Row& row, RateRow& r) {
  r.a = row.number("a", prefactor(r.unit));
  r.n = row.number("n", kExponent).value_or(0.0);
  r.ea = row.number("ea", kBarrier);
  r.k298 = row.number("k298", prefactor(r.unit));
  r.t_min = row.number("t_min", kTemperature);
  r.t_max = row.number("t_max", kTemperature);
  r.u_log10 = row.needed_number("u_log10", kLogU);
  r.coverage = row.word("coverage", words::coverage);
  if (r.t_min && r.t_max && *r.t_min > *r.t_max) row.fault("t_min is above t_max");
  if (!row.text("n").empty() && row.text("a").empty()) row.fault("n without a");
}

void check_agreement(const Row& row, const RateRow& r) {
  if (!r.a || !r.ea || !r.k298) return;
  const double k = *r.a * std::exp(-*r.ea / (kGasConstant * kReference));
  if (std::abs(k / *r.k298 - 1) <= kAgreement) return;
  row.fault(fmt::format("a and ea give {:.3g} at 298 K, k298 is {:.3g}: more than 10 % apart", k, *r.k298));
}

std::string values_text(const Row& row) {
  return fmt::format("{} {} {} {} {}", row.text("a"), row.text("n"), row.text("ea"), row.text("k298"),
                     row.text("source"));
}

void check_site(const Row& row, const RateRow& r, const Structure& m, Structures& structures) {
  if (r.h_count > m.hydrogens) row.fault(fmt::format("h_count {} is more than the H of {}", r.h_count, m.canonical));
  if (r.radical == "total") return;
  const auto* radical = structures.in(row, "radical");
  if (radical != nullptr) radical_site(row, m, *radical);
}

RateRow read_abstraction_row(const Row& row, SourceBook& sources, Structures& structures) {
  RateRow r;
  r.type = "abstraction";
  r.unit = "cm3";
  r.carrier = row.word("carrier", words::carrier);
  r.molecule = row.text("molecule");
  r.radical = row.text("radical");
  r.h_count = row.needed_count("h_count", 1, 200);
  read_coefficient(row, r);
  if (row.text("a").empty() != row.text("ea").empty()) row.fault("a and ea must both be given or both be empty");
  if (row.text("a").empty() && row.text("k298").empty()) row.fault("neither a with ea nor k298 is given");
  check_agreement(row, r);
  read_evidence(row, sources, r);
  r.fitted = row.word("use", words::use) == "fit";
  if (!r.fitted && r.note.empty()) row.fault("use is show and no note says why");
  if (const auto* m = structures.in(row, "molecule")) check_site(row, r, *m, structures);
  return r;
}

RateRow read_other_row(const Row& row, SourceBook& sources) {
  RateRow r;
  r.reaction = row.needed("reaction");
  r.type = row.word("type", words::step);
  r.unit = row.word("unit", words::rate_unit);
  read_coefficient(row, r);
  if (!row.text("a").empty() && row.text("ea").empty()) row.fault("a without ea");
  if (row.text("a").empty() && row.text("ea").empty() && row.text("k298").empty())
    row.fault("none of a with ea, ea and k298 is given");
  check_agreement(row, r);
  read_evidence(row, sources, r);
  if (r.reaction.empty()) return r;
  const auto reaction = parse_reaction(r.reaction);
  if (!reaction.ok()) {
    row.fault(fmt::format("reaction '{}' does not parse: {}, {}", r.reaction, reaction.error().message,
                          reaction.error().place));
  } else if (const auto why = imbalance(reaction.value().left, reaction.value().right)) {
    row.fault(fmt::format("reaction '{}' does not balance: {}", r.reaction, *why));
  }
  return r;
}

}  // namespace

std::size_t read_abstraction(const std::string& dir, Table& table, SourceBook& sources, Structures& structures,
                             Faults& faults) {
  const auto sheet =
      read_sheet(dir, "rates_abstraction.csv",
                 {"carrier", "molecule", "radical", "h_count", "a", "n", "ea", "t_min", "t_max", "k298", "u_log10",
                  "coverage", "method", "provenance", "source", "status", "reason", "use", "note"},
                 faults);
  Duplicates duplicates;
  for (std::size_t i = 0; i < sheet.lines.size(); ++i) {
    const Row row(sheet, i, faults);
    auto r = read_abstraction_row(row, sources, structures);
    duplicates.check(row, fmt::format("{} {} {} {}", r.carrier, r.molecule, r.radical, values_text(row)));
    table.rates.push_back(std::move(r));
  }
  return sheet.lines.size();
}

std::size_t read_other_rates(const std::string& dir, Table& table, SourceBook& sources, Faults& faults) {
  const auto sheet = read_sheet(dir, "rates_other.csv",
                                {"reaction", "type", "a", "n", "ea", "unit", "t_min", "t_max", "k298", "u_log10",
                                 "coverage", "method", "provenance", "source", "status", "reason", "note"},
                                faults);
  Duplicates duplicates;
  for (std::size_t i = 0; i < sheet.lines.size(); ++i) {
    const Row row(sheet, i, faults);
    auto r = read_other_row(row, sources);
    duplicates.check(row, fmt::format("{} {} {}", r.reaction, r.unit, values_text(row)));
    table.rates.push_back(std::move(r));
  }
  return sheet.lines.size();
}

}  // namespace halostep
