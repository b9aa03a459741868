#include "common.hpp"

#include <fmt/format.h>

#include <cstdio>

namespace halostep::command {

namespace {

/// A repeatable option that takes one value each time. Several values after one option would swallow the
/// substrates, and CLI11 then splits "[CH3]" as if it were a list.
CLI::Option* repeatable(CLI::App& app, const std::string& name, std::vector<std::string>& target,
                        const std::string& help) {
  return app.add_option(name, target, help)
      ->expected(1)
      ->allow_extra_args(false)
      ->multi_option_policy(CLI::MultiOptionPolicy::TakeAll);
}

std::string_view trimmed(std::string_view text) {
  while (!text.empty() && text.front() == ' ') text.remove_prefix(1);
  while (!text.empty() && text.back() == ' ') text.remove_suffix(1);
  return text;
}

/// "25C,127C" counts as two.
std::vector<std::string> split_commas(const std::vector<std::string>& texts) {
  std::vector<std::string> out;
  for (const auto& text : texts) {
    std::size_t from = 0;
    while (true) {
      const std::size_t comma = text.find(',', from);
      out.emplace_back(trimmed(std::string_view(text).substr(from, comma - from)));
      if (comma == std::string::npos) break;
      from = comma + 1;
    }
  }
  return out;
}

class UsageFormatter : public CLI::Formatter {
 public:
  explicit UsageFormatter(std::string usage) : usage_(std::move(usage)) { column_width(26); }
  std::string make_usage(const CLI::App*, std::string) const override { return "Usage: " + usage_ + "\n"; }

 private:
  std::string usage_;
};

bool unreadable(ErrorClass c) {
  switch (c) {
    case ErrorClass::empty:
    case ErrorClass::too_long:
    case ErrorClass::syntax:
    case ErrorClass::valence:
    case ErrorClass::aromaticity:
    case ErrorClass::charge:
    case ErrorClass::wildcard:
    case ErrorClass::reaction:
    case ErrorClass::element:
    case ErrorClass::io: return true;
    default: return false;
  }
}

}  // namespace

void set_usage(CLI::App& app, std::string usage) { app.formatter(std::make_shared<UsageFormatter>(std::move(usage))); }

void add_common(CLI::App& app, Options& o) {
  app.add_option("--format", o.format, "text, json or csv")->capture_default_str();
  app.add_option("--units", o.units, "kj or kcal per mole, in text and csv; JSON keys name their unit")
      ->capture_default_str();
  app.add_option("--table", o.table, "use this table instead of the built-in one")->check([](const std::string& path) {
    return std::string(path.empty() ? "a path is needed" : "");
  });
}

void add_input(CLI::App& app, Options& o) {
  repeatable(app, "--file", o.files,
             "read substrates from a file: SMILES lines, or .sdf/.mol; - is stdin (repeatable)");
  app.add_flag("--typed", o.typed, "use the fitted type values even where a measured bond exists");
  app.add_flag("--evidence", o.evidence, "list what is behind each answer (text; JSON always has it)");
  app.allow_extras();  // the substrates
}

void add_halogens(CLI::App& app, Options& o) {
  repeatable(app, "--halogen", o.halogens, "F, Cl, Br or I (repeatable; default all four)");
}

void add_temperatures(CLI::App& app, Options& o) {
  repeatable(app, "--temperature", o.temperatures,
             "number with unit C or K: 25C, '25 °C', 298.15K (repeatable; default 298.15K)");
}

Result<Settings> check(const Options& o) {
  Settings s;
  if (o.format == "json") {
    s.format = Format::json;
  } else if (o.format == "csv") {
    s.format = Format::csv;
  } else if (o.format != "text") {
    return Error{ErrorClass::usage, fmt::format("'{}' is no format: text, json or csv", o.format), "--format"};
  }
  if (o.units == "kcal") {
    s.text.unit = EnergyUnit::kcal;
  } else if (o.units != "kj") {
    return Error{ErrorClass::usage, fmt::format("'{}' is no unit: kj or kcal", o.units), "--units"};
  }
  s.text.evidence = o.evidence;
  for (const auto& text : split_commas(o.halogens)) {
    const auto x = parse_halogen(text);
    if (!x.ok()) return Error{x.error().cls, x.error().message, "--halogen"};
    if (std::find(s.halogens.begin(), s.halogens.end(), x.value()) == s.halogens.end()) s.halogens.push_back(x.value());
  }
  if (o.halogens.empty()) s.halogens.assign(std::begin(kAllHalogens), std::end(kAllHalogens));
  const auto texts = split_commas(o.temperatures);
  for (const auto& text : texts) {
    const auto t = parse_temperature(text);
    if (!t.ok()) {
      const bool commas = texts.size() > o.temperatures.size();
      const char* hint = commas ? "; a comma separates temperatures, the decimal point is '.'" : "";
      return Error{ErrorClass::usage, t.error().message + hint, "--temperature"};
    }
    if (std::find(s.temperatures.begin(), s.temperatures.end(), t.value()) == s.temperatures.end()) {
      s.temperatures.push_back(t.value());
    }
  }
  if (o.temperatures.empty()) s.temperatures.push_back(kReferenceTemperature);
  return s;
}

Result<std::vector<std::string>> positionals(const CLI::App& app, const Options& o) {
  std::vector<std::string> rest = app.remaining();
  for (const auto& text : rest) {
    if (!o.halogens.empty() && parse_halogen(text).ok()) {
      return Error{ErrorClass::usage,
                   fmt::format("'{0}' stands where a substrate is meant; write --halogen {1} --halogen {0}", text,
                               o.halogens.back()),
                   "command line"};
    }
    if (text.size() > 1 && text.front() == '-') {
      return Error{ErrorClass::usage, fmt::format("unknown option '{}'", text), "command line"};
    }
  }
  return rest;
}

void complain(const Error& error) {
  std::fflush(stdout);
  const std::string line = "halostep: " + error_line(error) + "\n";
  std::fwrite(line.data(), 1, line.size(), stderr);
}

Error refuse(const Input& input, Error error) {
  if (error.place.empty()) {
    error.place = input.place;
  } else if (error.place.find(input.place) == std::string::npos) {
    error.place += "; " + input.place;
  }
  complain(error);
  return error;
}

void Tally::refused(const Error& error) { ++(unreadable(error.cls) ? unreadable_ : outside_); }

int Tally::exit_code() const noexcept {
  if (unreadable_ + outside_ == 0) return kAnswered;
  if (answered_ > 0) return kPartly;
  return outside_ > 0 ? kOutsideDomain : kUnreadable;
}

int write_out(const std::string& document, int code) {
  const std::size_t written = std::fwrite(document.data(), 1, document.size(), stdout);
  if (written == document.size() && std::fflush(stdout) == 0) return code;
  complain({ErrorClass::io, "the answer could not be written", "standard output"});
  return kUnreadable;
}

std::optional<Engine> open_engine(const Options& options) {
  auto engine = Engine::open(options.table);
  if (engine.ok()) return std::move(engine).value();
  complain(engine.error());
  return std::nullopt;
}

}  // namespace halostep::command
