// Substrates from arguments, files and stdin.
#include <fmt/format.h>

#include <algorithm>
#include <filesystem>
#include <fstream>
#include <iostream>
#include <iterator>
#include <sstream>

#include "common.hpp"

namespace halostep::command {

namespace {

bool is_reaction_text(std::string_view text) { return text.find(">>") != std::string_view::npos; }

/// "CCO ethanol" -> structure and name.
std::pair<std::string, std::string> split_name(std::string_view text) {
  const std::size_t first = std::min(text.find_first_not_of(" \t"), text.size());
  text.remove_prefix(first);
  const std::size_t blank = std::min(text.find_first_of(" \t"), text.size());
  std::string_view name = text.substr(blank);
  name.remove_prefix(std::min(name.find_first_not_of(" \t"), name.size()));
  while (!name.empty() && (name.back() == ' ' || name.back() == '\t')) name.remove_suffix(1);
  return {std::string(text.substr(0, blank)), std::string(name)};
}

void describe(Input& input) {
  input.head.smiles = canonical_smiles(*input.molecule);
  input.head.formula = formula(*input.molecule);
}

Input from_text(std::string_view text, std::string place, bool reactions) {
  Input input;
  input.place = std::move(place);
  std::tie(input.head.input, input.head.name) = split_name(text);
  if (is_reaction_text(text)) {
    if (!is_reaction_text(input.head.input)) input.head.input = std::string(text);
    input.is_reaction = reactions;
    if (!reactions) {
      input.head.error =
          Error{ErrorClass::reaction, "reaction text where a substrate is meant; use halostep steps --reaction", {}};
    }
    return input;
  }
  auto molecule = parse_smiles(input.head.input);
  if (molecule.ok()) {
    input.molecule = std::move(molecule).value();
    describe(input);
  } else {
    input.head.error = molecule.error();
  }
  return input;
}

/// Takes the first line off the text; it ends with LF, CRLF or CR.
std::string_view take_line(std::string_view& text) {
  const std::size_t end = std::min(text.find_first_of("\r\n"), text.size());
  const std::string_view line = text.substr(0, end);
  text.remove_prefix(end);
  text.remove_prefix(text.substr(0, 2) == "\r\n" ? 2 : text.empty() ? 0 : 1);
  return line;
}

/// Lines of SMILES; blank lines and lines that start with '#' are passed over.
void read_lines(std::string_view text, const std::string& from, bool reactions, std::vector<Input>& out) {
  if (text.substr(0, 3) == "\xEF\xBB\xBF") text.remove_prefix(3);
  int number = 0;
  while (!text.empty()) {
    std::string_view line = take_line(text);
    ++number;
    while (!line.empty() && (line.back() == ' ' || line.back() == '\t')) line.remove_suffix(1);
    const std::size_t first = line.find_first_not_of(" \t");
    if (first == std::string_view::npos || line[first] == '#') continue;
    out.push_back(from_text(line, fmt::format("{}, line {}", from, number), reactions));
  }
}

void read_sdf(const std::string& text, const std::string& from, std::vector<Input>& out) {
  std::istringstream in(text);
  SdfReader reader(in);
  while (auto record = reader.next()) {
    Input input;
    input.place = fmt::format("{}, record {}", from, record->number);
    input.head.input = input.place;
    input.head.name = record->title;
    if (record->molecule.ok()) {
      input.molecule = std::move(record->molecule).value();
      describe(input);
    } else {
      input.head.error = record->molecule.error();
    }
    out.push_back(std::move(input));
  }
}

bool has_suffix(const std::string& name, std::string_view suffix) {
  if (name.size() < suffix.size()) return false;
  return std::equal(suffix.rbegin(), suffix.rend(), name.rbegin(),
                    [](char a, char b) { return a == (b >= 'A' && b <= 'Z' ? static_cast<char>(b + 32) : b); });
}

bool looks_like_sdf(const std::string& name, const std::string& text) {
  if (has_suffix(name, ".sdf") || has_suffix(name, ".mol") || has_suffix(name, ".sd")) return true;
  return name == "-" && (text.find("M  END") != std::string::npos || text.find("\n$$$$") != std::string::npos ||
                         text.find("\r$$$$") != std::string::npos);
}

Input unread_file(const std::string& name, ErrorClass cls, std::string message) {
  Input input;
  input.head.input = input.place = name == "-" ? "standard input" : name.empty() ? "--file ''" : name;
  input.head.error = Error{cls, std::move(message), {}};
  return input;
}

void read_file(const std::string& name, bool reactions, std::vector<Input>& out) {
  std::string text;
  if (name == "-") {
    text.assign(std::istreambuf_iterator<char>(std::cin), {});
  } else {
    std::error_code ec;
    if (std::filesystem::is_directory(name, ec)) {
      out.push_back(unread_file(name, ErrorClass::io, "a directory, not a file"));
      return;
    }
    std::ifstream in(name, std::ios::binary);
    if (in) text.assign(std::istreambuf_iterator<char>(in), {});
    if (!in.is_open() || in.bad()) {
      out.push_back(unread_file(name, ErrorClass::io, "the file cannot be read"));
      return;
    }
  }
  if (text.find('\0') != std::string::npos) {
    out.push_back(unread_file(name, ErrorClass::io, "not a text file: it holds zero bytes"));
    return;
  }
  const std::size_t before = out.size();
  const std::string from = name == "-" ? "standard input" : name;
  if (looks_like_sdf(name, text)) {
    read_sdf(text, from, out);
  } else {
    read_lines(text, from, reactions, out);
  }
  if (out.size() == before) out.push_back(unread_file(name, ErrorClass::empty, "no structure in it"));
}

}  // namespace

Result<std::vector<Input>> read_inputs(const CLI::App& app, const Options& options, bool reactions) {
  const auto arguments = positionals(app, options);
  if (!arguments.ok()) return arguments.error();
  if (std::count(arguments.value().begin(), arguments.value().end(), "-") +
          std::count(options.files.begin(), options.files.end(), "-") >
      1) {
    return Error{ErrorClass::usage, "standard input can be read once only", "-"};
  }
  std::vector<Input> out;
  int number = 0;
  for (const auto& text : arguments.value()) {
    ++number;
    if (text == "-") {
      read_file(text, reactions, out);
    } else if (text.find_first_of("\r\n") != std::string::npos) {  // "$(cat substrates.smi)"
      const std::size_t before = out.size();
      read_lines(text, fmt::format("argument {}", number), reactions, out);
      if (out.size() == before) out.push_back(from_text({}, fmt::format("argument {}", number), reactions));
    } else {
      out.push_back(from_text(text, fmt::format("argument {}", number), reactions));
    }
  }
  for (const auto& text : options.reactions) {
    Input input = from_text(text, "--reaction", true);
    input.is_reaction = true;  // text without '>>' is refused by the engine
    input.molecule.reset();
    input.head.error.reset();
    out.push_back(std::move(input));
  }
  for (const auto& file : options.files) read_file(file, reactions, out);
  if (out.empty()) {
    return Error{ErrorClass::usage,
                 fmt::format("no substrate; give SMILES, --file FILE or - (halostep {} --help)", app.get_name()),
                 "command line"};
  }
  return out;
}

}  // namespace halostep::command
