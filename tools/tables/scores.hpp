// Collected errors of one class of rows, beside those of a naive rule on the same rows.
#pragma once
#include <map>
#include <nlohmann/json_fwd.hpp>
#include <string>
#include <vector>

namespace halostep {

struct Score {
  std::vector<double> error, naive;  // signed
  int within = 0, with_u = 0;        // inside 2 combined u, of those with u
  int refused = 0;
  void add(double e, double naive_e);
  void add(double e, double u, double naive_e);
};

/// One section of the report: classes in order of their names, and how to read the figures.
struct Section {
  std::string id, title, unit, naive, note;
  int decimals = 2;
  std::map<std::string, Score> classes;
  std::vector<std::pair<double, std::string>> rows;  // |error|, what

  void row(double error, std::string what) { rows.emplace_back(error < 0 ? -error : error, std::move(what)); }
};

std::string section_markdown(const Section& s);
nlohmann::json section_json(const Section& s);

}  // namespace halostep
