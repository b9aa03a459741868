#include "tables/summary.hpp"

#include <fmt/format.h>

#include <nlohmann/json.hpp>
#include <optional>
#include <utility>
#include <vector>

namespace halostep {
namespace {

enum class Kind { most, least, between };

// A target for one figure of one class; `low` is for `between`.
struct Target {
  const char *what, *section, *cls, *figure;
  Kind kind;
  double bound, low = 0;
  const char* unit = "";
  int decimals = 2;
};

constexpr const char *kJ = "kJ/mol", *kLog = "decades", *kFraction = "mole fraction";

const Target kTargets[] = {
    {"D(C-H), rows judged", "bonds", "all C-H", "rows", Kind::least, 110, 0, "", 0},
    {"D(C-H), mean error", "bonds", "all C-H", "mean_abs", Kind::most, 6.5, 0, kJ, 1},
    {"D(C-H), mean error, the aim beyond", "bonds", "all C-H", "mean_abs", Kind::most, 4.2, 0, kJ, 1},
    {"D(R-X), mean error", "halides", "all C-X", "mean_abs", Kind::most, 6, 0, kJ, 1},
    {"D(R-X), mean error, the aim beyond", "halides", "all C-X", "mean_abs", Kind::most, 4.2, 0, kJ, 1},
    {"D(C-H), values inside the 95 % interval", "bonds", "all C-H", "coverage_95", Kind::between, 0.98, 0.90, "", 3},
    {"D(R-X), values inside the 95 % interval", "halides", "all C-X", "coverage_95", Kind::between, 0.98, 0.90, "", 3},
    {"measured bonds, each source inside the 95 % interval of the others", "sources", "all bonds", "coverage_95",
     Kind::between, 0.98, 0.90, "", 3},
    {"k of Cl, values inside the 95 % interval", "rates", "Cl + all", "coverage_95", Kind::between, 0.98, 0.90, "", 3},
    {"D(C-H), median u", "bonds", "all C-H", "median_u", Kind::most, 5, 0, kJ, 1},
    {"k of Cl, median u", "rates", "Cl + all", "median_u", Kind::most, 0.15, 0, kLog, 2},
    {"D(C-H), interval score over that of class mean and deviation", "bonds", "all C-H", "score_ratio", Kind::most, 1,
     0, "", 2},
    {"D(R-X), interval score over that of class mean and deviation", "halides", "all C-X", "score_ratio", Kind::most, 1,
     0, "", 2},
    {"k of Cl, interval score over that of class mean and deviation", "rates", "Cl + all", "score_ratio", Kind::most, 1,
     0, "", 2},
    {"Cl + alkanes and cycloalkanes, rms", "rates", "Cl + alkanes, cycloalkanes", "rms", Kind::most, 0.07, 0, kLog, 3},
    {"Cl + methane, its rates left out, largest (factor 3)", "rates", "Cl + methane, its rates alone left out",
     "largest", Kind::most, 0.477, 0, kLog, 2},
    {"Cl + cyclopropane, its rates left out, largest (factor 3)", "rates",
     "Cl + cyclopropane, its rates alone left out", "largest", Kind::most, 0.477, 0, kLog, 2},
    {"Cl + haloalkanes, median", "rates", "Cl + haloalkanes", "median_abs", Kind::most, 0.20, 0, kLog, 3},
    {"Cl + haloalkanes, rms", "rates", "Cl + haloalkanes", "rms", Kind::most, 0.45, 0, kLog, 3},
    {"Cl + all organics, median", "rates", "Cl + all", "median_abs", Kind::most, 0.15, 0, kLog, 3},
    {"Cl + all organics, median, the aim beyond", "rates", "Cl + all", "median_abs", Kind::most, 0.12, 0, kLog, 3},
    {"Cl + all organics, rms", "rates", "Cl + all", "rms", Kind::most, 0.45, 0, kLog, 3},
    {"Cl + all organics, rms, the aim beyond", "rates", "Cl + all", "rms", Kind::most, 0.40, 0, kLog, 3},
    {"Cl + all organics, 95 % within", "rates", "Cl + all", "p95", Kind::most, 0.9, 0, kLog, 2},
    {"Cl + all organics without a mark, largest", "rates", "Cl + all, not marked extrapolated", "largest", Kind::most,
     2, 0, kLog, 2},
    {"Br + C-H, rms", "rates", "Br + all", "rms", Kind::most, 0.5, 0, kLog, 2},
    {"Br + alkanes and cycloalkanes, rms", "rates", "Br + alkanes, cycloalkanes", "rms", Kind::most, 0.3, 0, kLog, 2},
    {"F + C-H, rms", "rates", "F + all", "rms", Kind::most, 0.25, 0, kLog, 2},
    {"I + C-H, Ea, largest", "reverse", "I + R-H, forward", "largest", Kind::most, 8, 0, kJ, 1},
    {"Cl, five temperatures, rms beyond that near 298 K", "temperatures", "Cl, five temperatures", "rms_beyond",
     Kind::most, 0.15, 0, kLog, 2},
    {"Br, five temperatures, rms beyond that near 298 K", "temperatures", "Br, five temperatures", "rms_beyond",
     Kind::most, 0.15, 0, kLog, 2},
    {"F, five temperatures, rms beyond that near 298 K", "temperatures", "F, five temperatures", "rms_beyond",
     Kind::most, 0.15, 0, kLog, 2},
    {"R + HCl, Ea, largest", "reverse", "R + HCl", "largest", Kind::most, 6, 0, kJ, 1},
    {"R + HBr, Ea, largest", "reverse", "R + HBr", "largest", Kind::most, 6, 0, kJ, 1},
    {"R + HI, Ea, largest", "reverse", "R + HI", "largest", Kind::most, 6, 0, kJ, 1},
    {"Cl2 + alkanes up to 40 C, mean error of a mixture", "mixtures", "Cl2 + alkanes, up to 40 C", "mean_abs",
     Kind::most, 0.02, 0, kFraction, 3},
    {"Cl2 + alkanes up to 40 C; molecule alone out", "mixtures", "Cl2 + alkanes, up to 40 C; molecule alone out",
     "mean_abs", Kind::most, 0.02, 0, kFraction, 3},
    {"Cl2 + adamantane", "mixtures", "Cl2 + adamantane", "mean_abs", Kind::most, 0.08, 0, kFraction, 3},
    {"Cl2 + adamantane; molecule alone out", "mixtures", "Cl2 + adamantane; molecule alone out", "mean_abs", Kind::most, 0.08, 0, kFraction, 3},
    {"Cl2 + alkanes, 100 to 300 C", "mixtures", "Cl2 + alkanes, 100 to 300 C", "mean_abs", Kind::most, 0.03, 0,
     kFraction, 3},
    {"Cl2 + alkanes, 100 to 300 C; molecule alone out", "mixtures", "Cl2 + alkanes, 100 to 300 C; molecule alone out",
     "mean_abs", Kind::most, 0.03, 0, kFraction, 3},
    {"Cl2, complexing solvents", "mixtures", "Cl2, complexing solvent, molarity left out", "mean_abs", Kind::most, 0.05,
     0, kFraction, 3},
    {"Br2 + alkanes", "mixtures", "Br2 + hydrocarbons", "mean_abs", Kind::most, 0.02, 0, kFraction, 3},
    {"Br2 + alkanes; molecule alone out", "mixtures", "Br2 + hydrocarbons; molecule alone out", "mean_abs", Kind::most,
     0.02, 0, kFraction, 3},
    {"F2 + alkanes", "mixtures", "F2 + hydrocarbons", "mean_abs", Kind::most, 0.02, 0, kFraction, 3},
    {"F2 + alkanes; molecule alone out", "mixtures", "F2 + hydrocarbons; molecule alone out", "mean_abs", Kind::most,
     0.02, 0, kFraction, 3},
    {"Cl2, SO2Cl2 + substituted substrates", "mixtures", "Cl2, SO2Cl2 + substituted", "mean_abs", Kind::most, 0.06, 0,
     kFraction, 3},
    {"Cl2, SO2Cl2 + substituted substrates; molecule alone out", "mixtures",
     "Cl2, SO2Cl2 + substituted; molecule alone out", "mean_abs", Kind::most, 0.06, 0, kFraction, 3},
    {"Br2, NBS + substituted substrates", "mixtures", "Br2, NBS + substituted", "mean_abs", Kind::most, 0.06, 0,
     kFraction, 3},
    {"Br2, NBS + substituted substrates; molecule alone out", "mixtures", "Br2, NBS + substituted; molecule alone out",
     "mean_abs", Kind::most, 0.06, 0, kFraction, 3},
    {"F2 + substituted substrates", "mixtures", "F2 + substituted", "mean_abs", Kind::most, 0.06, 0, kFraction, 3},
    {"shares inside their 95 % interval", "mixtures", "all of these", "within_2u", Kind::least, 0.90, 0, "", 3},
    {"shares inside their 95 % interval; molecule alone out", "mixtures", "all of these; molecule alone out",
     "within_2u", Kind::least, 0.90, 0, "", 3},
    {"relative rates per H, Cl, hydrocarbons, rms", "ratios", "Cl2 + hydrocarbons", "rms", Kind::most, 0.15, 0, kLog,
     3},
    {"relative rates per H, Cl, polar substrates, rms", "ratios", "Cl2 + polar substrates", "rms", Kind::most, 0.25, 0,
     kLog, 3},
    {"relative rates per H, Br, hydrocarbons, rms", "ratios", "Br2 + hydrocarbons", "rms", Kind::most, 0.4, 0, kLog, 3},
    {"relative rates per H, Br, polar substrates, rms", "ratios", "Br2 + polar substrates", "rms", Kind::most, 0.4, 0,
     kLog, 3},
    {"two site rates ordered wrong, Cl", "ratios", "order, Cl2", "mean_abs", Kind::most, 0.10, 0, "", 3},
    {"two site rates ordered wrong, Br", "ratios", "order, Br2", "mean_abs", Kind::most, 0.10, 0, "", 3},
    {"ratio in benzene, molarity left out, largest (30 %)", "media", "benzene, left out", "largest", Kind::most, 0.262,
     0, "ln", 3},
    {"ratio in CS2, molarity left out, largest (30 %)", "media", "CS2, left out", "largest", Kind::most, 0.262, 0, "ln",
     3},
};

// Marked answers must be the worse ones: mean error over that of the unmarked.
struct Flag {
  const char *what, *section, *marked, *other;
};
const Flag kFlags[] = {
    {"D of X-H, mean error of answers marked thin over the others", "bonds", "marked thin", "not marked thin"},
    {"D(R-X), mean error of answers marked thin over the others", "halides", "marked thin", "not marked thin"},
    {"k of Cl, mean error of answers marked extrapolated over the others", "rates", "Cl + all, marked extrapolated",
     "Cl + all, not marked extrapolated"},
    {"mixtures, mean error of those marked extrapolated over the others", "mixtures", "all, marked extrapolated",
     "all, not marked extrapolated"},
};

const nlohmann::json* section_of(const nlohmann::json& doc, const std::string& id) {
  for (const auto& s : doc.at("sections")) {
    if (s.at("id") == id) return &s;
  }
  return nullptr;
}

std::optional<double> figure(const nlohmann::json& doc, const std::string& section, const std::string& cls,
                             const std::string& key) {
  const auto* s = section_of(doc, section);
  if (s == nullptr) return std::nullopt;
  for (const auto& c : s->at("classes")) {
    if (c.at("class") != cls) continue;
    if (c.at("rows") == 0 || !c.contains(key) || c.at(key).is_null()) return std::nullopt;
    return c.at(key).get<double>();
  }
  return std::nullopt;
}

std::optional<double> ratio(std::optional<double> a, std::optional<double> b) {
  return a && b && *b > 0 ? std::optional(*a / *b) : std::nullopt;
}

// Figures of a class, and those that take two.
std::optional<double> value_of(const nlohmann::json& doc, const Target& t) {
  const std::string key = t.figure;
  if (key == "score_ratio")
    return ratio(figure(doc, t.section, t.cls, "interval_score"),
                 figure(doc, t.section, t.cls, "naive_interval_score"));
  if (key != "rms_beyond") return figure(doc, t.section, t.cls, key);
  const std::string carrier = std::string(t.cls).substr(0, std::string(t.cls).find(','));
  const auto wide = figure(doc, t.section, t.cls, "rms"),
             near = figure(doc, t.section, carrier + ", the same rows near 298 K", "rms");
  return wide && near ? std::optional(*wide - *near) : std::nullopt;
}

nlohmann::json entry(const Target& t, std::optional<double> v) {
  nlohmann::json out = {{"target", t.what}, {"unit", t.unit},   {"decimals", t.decimals}, {"figure", nullptr},
                        {"met", nullptr},   {"least", nullptr}, {"most", nullptr}};
  if (t.kind == Kind::least) out["least"] = t.bound;
  if (t.kind == Kind::most) out["most"] = t.bound;
  if (t.kind == Kind::between) out["least"] = t.low, out["most"] = t.bound;
  if (!v) return out;
  out["figure"] = *v;
  out["met"] = (t.kind == Kind::most || *v >= (t.kind == Kind::least ? t.bound : t.low)) &&
               (t.kind == Kind::least || *v <= t.bound);
  return out;
}

// Each family of C-H bonds with five rows or more has a target of its own.
void add_families(const nlohmann::json& doc, nlohmann::json& out) {
  constexpr double kFewest = 5;
  for (const char* name : {"alkyl", "cycloalkyl", "haloalkyl", "allyl, propargyl, benzyl", "alpha to O, N, S",
                           "alpha to C=O, CN", "aldehyde", "vinyl, aryl, alkynyl"}) {
    const bool enough = figure(doc, "bonds", name, "rows").value_or(0) >= kFewest;
    const auto put = [&](const char* word, const char* key, double bound) {
      const auto what = fmt::format("D(C-H), {}, {} error{}", name, word, enough ? "" : " (fewer than five rows)");
      const Target t{what.c_str(), "bonds", name, key, Kind::most, bound, 0, kJ, 1};
      out.push_back(entry(t, enough ? figure(doc, "bonds", name, key) : std::nullopt));
    };
    put("mean", "mean_abs", 5.0);
    put("median", "median_abs", 3.5);
  }
}

std::string number(const nlohmann::json& v, int decimals) {
  return v.is_null() ? "-" : fmt::format("{:.{}f}", v.get<double>(), decimals);
}

}  // namespace

nlohmann::json summary_json(const nlohmann::json& doc) {
  auto out = nlohmann::json::array();
  for (const auto& t : kTargets) {
    out.push_back(entry(t, value_of(doc, t)));
    if (std::string(t.what) == "D(C-H), mean error, the aim beyond") add_families(doc, out);
  }
  for (const auto& f : kFlags) {
    const Target t{f.what, f.section, f.marked, "mean_abs", Kind::least, 1, 0, "", 2};
    out.push_back(
        entry(t, ratio(figure(doc, f.section, f.marked, "mean_abs"), figure(doc, f.section, f.other, "mean_abs"))));
  }
  for (const auto& g : doc.at("judged")) {
    constexpr std::pair<const char*, const char*> kShares[] = {{"excluded", "excluded_share"},
                                                               {"excluded or refused", "left_out_share"}};
    for (const auto& [word, key] : kShares) {
      const auto what = fmt::format("rows that could judge but are {}, {}", word, g.at("group").get<std::string>());
      const Target t{what.c_str(), "", "", "", Kind::most, 0.10, 0, "", 3};
      out.push_back(entry(t, g.at(key).get<double>()));
    }
  }
  return out;
}

std::string summary_markdown(const nlohmann::json& summary) {
  std::string out;
  int met = 0, missed = 0;
  for (const auto& e : summary) {
    const int d = e.at("decimals").get<int>();
    const bool least = !e.at("least").is_null(), most = !e.at("most").is_null();
    const auto bound = least && most ? number(e.at("least"), d) + " to " + number(e.at("most"), d)
                       : least       ? "at least " + number(e.at("least"), d)
                                     : "at most " + number(e.at("most"), d);
    const bool known = !e.at("met").is_null(), good = known && e.at("met").get<bool>();
    if (known) ++(good ? met : missed);
    const auto unit = e.at("unit").get<std::string>();
    out += fmt::format("| {} | {}{}{} | {} | {} |\n", e.at("target").get<std::string>(), bound, unit.empty() ? "" : " ",
                       unit, number(e.at("figure"), d),
                       !known ? "no figure"
                       : good ? "met"
                              : "not met");
  }
  return fmt::format(
             "## Targets\n\n{} met, {} not met, {} without a figure. All out of sample; \"-\" where no row could be "
             "judged.\n\n"
             "| target | bound | figure | |\n|---|---|---|---|\n",
             met, missed, summary.size() - static_cast<std::size_t>(met + missed)) +
         out + "\n";
}

}  // namespace halostep
