#include "tables/scores.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <nlohmann/json.hpp>

namespace halostep {
namespace {

struct Figures {
  double mean = 0, median = 0, rms = 0, largest = 0;
};

Figures figures(std::vector<double> e) {
  Figures f;
  if (e.empty()) return f;
  for (auto& v : e) {
    v = std::abs(v);
    f.mean += v;
    f.rms += v * v;
  }
  std::sort(e.begin(), e.end());
  const auto n = static_cast<double>(e.size());
  f.mean /= n;
  f.rms = std::sqrt(f.rms / n);
  f.median = e.size() % 2 ? e[e.size() / 2] : 0.5 * (e[e.size() / 2 - 1] + e[e.size() / 2]);
  f.largest = e.back();
  return f;
}

constexpr std::size_t kFar = 10;

}  // namespace

void Score::add(double e, double naive_e) {
  error.push_back(e);
  if (std::isfinite(naive_e)) naive.push_back(naive_e);
}

void Score::add(double e, double u, double naive_e) {
  add(e, naive_e);
  ++with_u;
  within += std::abs(e) <= 2 * u;
}

std::string section_markdown(const Section& s) {
  std::string out = fmt::format("## {}\n\n{}\n\n", s.title, s.note);
  out += fmt::format("Errors in {}. Naive rule on the same rows: {}.\n\n", s.unit, s.naive);
  out += "| class | rows | mean abs. | median abs. | rms | largest | within 2u | naive mean abs. | naive rms | refused |\n";
  out += "|---|---|---|---|---|---|---|---|---|---|\n";
  for (const auto& [name, c] : s.classes) {
    const auto f = figures(c.error), n = figures(c.naive);
    const auto number = [&](double v, bool known) { return known ? fmt::format("{:.{}f}", v, s.decimals) : std::string("-"); };
    const bool any = !c.error.empty(), naive = !c.naive.empty();
    out += fmt::format("| {} | {} | {} | {} | {} | {} | {} | {} | {} | {} |\n", name, c.error.size(), number(f.mean, any),
                       number(f.median, any), number(f.rms, any), number(f.largest, any),
                       c.with_u > 0 ? fmt::format("{:.0f} %", 100.0 * c.within / c.with_u) : "-", number(n.mean, naive),
                       number(n.rms, naive), c.refused);
  }
  auto rows = s.rows;
  std::sort(rows.begin(), rows.end(), [](const auto& a, const auto& b) { return a.first != b.first ? a.first > b.first : a.second < b.second; });
  if (!rows.empty()) out += "\nFarthest:\n\n";
  for (std::size_t i = 0; i < std::min(kFar, rows.size()); ++i) out += "- " + rows[i].second + "\n";
  return out + "\n";
}

nlohmann::json section_json(const Section& s) {
  nlohmann::json out = {{"id", s.id}, {"unit", s.unit}, {"naive", s.naive}, {"classes", nlohmann::json::array()}};
  for (const auto& [name, c] : s.classes) {
    const auto f = figures(c.error), n = figures(c.naive);
    nlohmann::json one = {{"class", name}, {"rows", c.error.size()}, {"refused", c.refused}};
    const auto put = [&](const char* key, double v, bool known) { one[key] = known ? nlohmann::json(v) : nlohmann::json(); };
    put("mean_abs", f.mean, !c.error.empty());
    put("median_abs", f.median, !c.error.empty());
    put("rms", f.rms, !c.error.empty());
    put("largest", f.largest, !c.error.empty());
    put("within_2u", c.with_u > 0 ? static_cast<double>(c.within) / c.with_u : 0, c.with_u > 0);
    put("naive_mean_abs", n.mean, !c.naive.empty());
    put("naive_rms", n.rms, !c.naive.empty());
    out["classes"].push_back(std::move(one));
  }
  return out;
}

}  // namespace halostep
