#include "tables/scores.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>
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

void Score::add(double e, double u, double judge_u, double naive_e, std::pair<double, double> class_mean) {
  const double both = std::hypot(u, judge_u);
  add(e, both, naive_e);
  answer_u.push_back(u);
  judged.emplace_back(e, both);
  if (std::isfinite(class_mean.first) && class_mean.second > 0) naive_class.push_back(class_mean);
}

Calibration calibration(const Score& s) {
  constexpr double kNormal = 1.96;  // 95 % of a normal distribution
  // Width of the 95 % interval, and 2/alpha = 40 for each unit outside it (Winkler, J. Am. Stat. Assoc. 1972, 67, 187).
  const auto score = [&](const std::vector<std::pair<double, double>>& v) {
    double sum = 0;
    for (const auto& [e, u] : v) sum += 2 * kNormal * u + 40 * std::max(0.0, std::abs(e) - kNormal * u);
    return sum / static_cast<double>(v.size());
  };
  Calibration c;
  if (s.judged.empty()) return c;
  const auto inside = std::count_if(s.judged.begin(), s.judged.end(), [&](const auto& j) { return std::abs(j.first) <= kNormal * j.second; });
  c.coverage = static_cast<double>(inside) / static_cast<double>(s.judged.size());
  c.median_u = figures(s.answer_u).median;
  c.interval_score = score(s.judged);
  c.naive_interval_score = s.naive_class.empty() ? 0 : score(s.naive_class);
  return c;
}

namespace {

std::string calibration_markdown(const Section& s) {
  std::string out;
  for (const auto& [name, c] : s.classes) {
    if (c.judged.empty()) continue;
    const auto k = calibration(c);
    const bool naive = c.naive_class.size() == c.judged.size();
    const int coarse = std::max(0, s.decimals - 1);
    out += fmt::format("| {} | {} | {:.0f} % | {:.{}f} | {:.{}f} | {} |\n", name, c.judged.size(), 100 * k.coverage, k.median_u, s.decimals,
                       k.interval_score, coarse, naive ? fmt::format("{:.{}f}", k.naive_interval_score, coarse) : "-");
  }
  if (out.empty()) return out;
  return "\n95 % intervals, 1.96 u with the judge's own u; median u is that of the answer alone. Interval score: width plus 40 "
         "times what lies outside (smaller is better), beside the mean of the class and its deviation.\n\n"
         "| class | rows | inside | median u | interval score | of the class mean |\n|---|---|---|---|---|---|\n" + out;
}

}  // namespace

double quantile_of(std::vector<double> e, double q) {
  if (e.empty()) return 0;
  for (auto& v : e) v = std::abs(v);
  std::sort(e.begin(), e.end());
  return e[std::min(e.size() - 1, static_cast<std::size_t>(q * static_cast<double>(e.size())))];
}

std::pair<double, double> mean_and_deviation(const std::vector<double>& v) {
  if (v.size() < 2) return {std::numeric_limits<double>::quiet_NaN(), 0};
  double mean = 0, square = 0;
  for (const double x : v) mean += x / static_cast<double>(v.size());
  for (const double x : v) square += (x - mean) * (x - mean);
  return {mean, std::sqrt(square / static_cast<double>(v.size() - 1))};
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
  out += calibration_markdown(s);
  if (!s.remarks.empty()) out += "\n";
  for (const auto& r : s.remarks) out += "- " + r + "\n";
  auto rows = s.rows;
  std::sort(rows.begin(), rows.end(), [](const auto& a, const auto& b) { return a.first != b.first ? a.first > b.first : a.second < b.second; });
  if (!rows.empty()) out += "\nFarthest:\n\n";
  for (std::size_t i = 0; i < std::min(kFar, rows.size()); ++i) out += "- " + rows[i].second + "\n";
  if (!s.tail.empty()) out += "\n" + s.tail;
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
    put("p95", quantile_of(c.error, 0.95), !c.error.empty());
    put("within_2u", c.with_u > 0 ? static_cast<double>(c.within) / c.with_u : 0, c.with_u > 0);
    put("naive_mean_abs", n.mean, !c.naive.empty());
    put("naive_rms", n.rms, !c.naive.empty());
    if (!c.judged.empty()) {
      const auto k = calibration(c);
      one["coverage_95"] = k.coverage;
      one["median_u"] = k.median_u;
      one["interval_score"] = k.interval_score;
      put("naive_interval_score", k.naive_interval_score, !c.naive_class.empty());
    }
    out["classes"].push_back(std::move(one));
  }
  out["remarks"] = s.remarks;
  return out;
}

}  // namespace halostep
