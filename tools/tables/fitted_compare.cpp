#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "tables/fitted_file.hpp"

namespace halostep {
namespace {

constexpr double kTolerance = 1e-8;

double largest(const std::vector<double>& v) {
  double most = 0;
  for (const double x : v) most = std::max(most, std::abs(x));
  return most;
}

/// NaN never agrees.
bool agree(double a, double b, double scale) { return std::abs(a - b) <= kTolerance * scale; }

class Comparison {
 public:
  Comparison(const FittedModel& stored, const FittedModel& fitted) : a_(stored), b_(fitted) {}

  std::vector<std::string> run() {
    if (a_.parameters != b_.parameters) {
      tell("its parameters", names(a_.parameters), names(b_.parameters));
      return std::move(out_);
    }
    parameters();
    covariance();
    settings();
    return std::move(out_);
  }

 private:
  template <class T>
  void tell(const std::string& what, const T& stored, const T& fitted) {
    out_.push_back(fmt::format("model '{}': {}: {} in the file, {} fitted now", a_.name, what, stored, fitted));
  }
  static std::string names(const std::vector<std::string>& list) { return fmt::format("{}", fmt::join(list, ", ")); }

  void parameters() {
    const double scale = std::max(largest(a_.values), largest(b_.values));
    for (std::size_t i = 0; i < a_.values.size(); ++i) {
      const auto what = fmt::format("parameter '{}'", a_.parameters[i]);
      if (!agree(a_.values[i], b_.values[i], scale)) tell(what, a_.values[i], b_.values[i]);
      if (a_.support[i] != b_.support[i]) tell(what + ", support", a_.support[i], b_.support[i]);
    }
  }

  void covariance() {
    const double scale = std::max(largest(a_.covariance), largest(b_.covariance));
    const auto n = a_.parameters.size();
    for (std::size_t i = 0; i < n; ++i) {
      for (std::size_t j = 0; j <= i; ++j) {
        const double x = a_.covariance[i * n + j], y = b_.covariance[i * n + j];
        if (agree(x, y, scale)) continue;
        tell(fmt::format("covariance of '{}' and '{}'", a_.parameters[i], a_.parameters[j]), x, y);
        return;  // one says it: the rest of the matrix is off as well
      }
    }
  }

  void settings() {
    const auto& x = a_.settings;
    const auto& y = b_.settings;
    const bool same_names = std::equal(x.begin(), x.end(), y.begin(), y.end(),
                                       [](const auto& p, const auto& q) { return p.first == q.first; });
    if (!same_names) {
      tell("number or names of its settings", x.size(), y.size());
      return;
    }
    for (std::size_t i = 0; i < x.size(); ++i) {
      const double scale = std::max(std::abs(x[i].second), std::abs(y[i].second));
      if (!agree(x[i].second, y[i].second, scale)) tell("setting " + x[i].first, x[i].second, y[i].second);
    }
  }

  const FittedModel& a_;
  const FittedModel& b_;
  std::vector<std::string> out_;
};

}  // namespace

std::vector<std::string> model_differences(const std::vector<FittedModel>& stored,
                                           const std::vector<FittedModel>& fitted) {
  std::vector<std::string> out;
  for (std::size_t i = 0; i < std::max(stored.size(), fitted.size()); ++i) {
    if (i >= stored.size())
      out.push_back(fmt::format("model '{}' is fitted now and not in the file", fitted[i].name));
    else if (i >= fitted.size())
      out.push_back(fmt::format("model '{}' is in the file and not fitted now", stored[i].name));
    else if (stored[i].name != fitted[i].name) {
      out.push_back(
          fmt::format("model {} is '{}' in the file, '{}' fitted now", i + 1, stored[i].name, fitted[i].name));
    } else {
      for (auto& line : Comparison(stored[i], fitted[i]).run()) out.push_back(std::move(line));
    }
  }
  return out;
}

}  // namespace halostep
