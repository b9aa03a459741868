// Collected errors of one class of rows, beside those of a naive rule on the same rows.
#pragma once
#include <map>
#include <nlohmann/json_fwd.hpp>
#include <string>
#include <vector>

#include "tables/judged_list.hpp"

namespace halostep {

struct Score {
  std::vector<double> error, naive;  // signed
  int within = 0, with_u = 0;        // inside 2 combined u, of those with u
  // For calibration, where judged: u of the answer, error and combined u, error and deviation of the naive class.
  std::vector<double> answer_u;
  std::vector<std::pair<double, double>> judged, naive_class;
  int refused = 0;
  void add(double e, double naive_e);
  void add(double e, double u, double naive_e);
  /// The same with what calibration needs: u of the answer apart from the judge's, and the class's mean and deviation.
  void add(double e, double answer_u, double judge_u, double naive_e, std::pair<double, double> class_mean);
};

/// How well intervals fit, over one class.
struct Calibration {
  double coverage = 0, median_u = 0, interval_score = 0, naive_interval_score = 0;
};
Calibration calibration(const Score& s);

/// One section of the report: classes in order of their names, and how to read the figures.
struct Section {
  std::string id, title, unit, naive, note;
  int decimals = 2;
  std::map<std::string, Score> classes;
  std::vector<std::pair<double, std::string>> rows;  // |error|, what
  std::vector<std::string> remarks{};                // printed below the table
  std::string tail{};                                // printed after the rows
  std::vector<JudgedRow> judged{};                   // every row that could judge

  void row(double error, std::string what) { rows.emplace_back(error < 0 ? -error : error, std::move(what)); }
  void list(std::string group, std::string key, Judged state = Judged::yes, std::string reason = {}) {
    judged.push_back({std::move(group), std::move(key), state, std::move(reason)});
  }
};

/// Quantile q of the absolute values; 0 of nothing.
double quantile_of(std::vector<double> e, double q);

/// Mean and standard deviation; not a number of fewer than two.
std::pair<double, double> mean_and_deviation(const std::vector<double>& v);

std::string section_markdown(const Section& s);
nlohmann::json section_json(const Section& s);

}  // namespace halostep
