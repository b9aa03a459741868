#include "tables/csv_reader.hpp"

#include <fmt/format.h>

namespace halostep {
namespace {

/// Length of the UTF-8 sequence at `i`, 0 when it is not one (overlong forms are not looked for).
std::size_t utf8_length(std::string_view text, std::size_t i) {
  const auto lead = static_cast<unsigned char>(text[i]);
  const std::size_t length = lead < 0x80 ? 1 : (lead >> 5) == 6 ? 2 : (lead >> 4) == 14 ? 3 : (lead >> 3) == 30 ? 4 : 0;
  if (length == 0 || i + length > text.size()) return 0;
  for (std::size_t k = 1; k < length; ++k) {
    if ((static_cast<unsigned char>(text[i + k]) >> 6) != 2) return 0;
  }
  return length;
}

class CsvParser {
 public:
  explicit CsvParser(std::string_view text) : text_(text) {}

  Result<std::vector<CsvRecord>> run() {
    while (at_ < text_.size()) {
      if (text_[at_] == '\n') return fail(line_, "a blank line");
      CsvRecord record{line_, {}};
      const char* why = nullptr;
      while ((why = field(record)) == nullptr && more_) {
      }
      if (why != nullptr) return fail(line_, why);
      records_.push_back(std::move(record));
    }
    return std::move(records_);
  }

 private:
  Error fail(int line, const char* why) const { return {ErrorClass::syntax, why, fmt::format("line {}", line)}; }

  /// Reads one field; sets more_ when a comma follows. Returns why it cannot, or nullptr.
  const char* field(CsvRecord& record) {
    std::string value;
    const bool quoted = at_ < text_.size() && text_[at_] == '"';
    const char* why = quoted ? quoted_field(value) : plain_field(value);
    if (why != nullptr) return why;
    record.fields.push_back(std::move(value));
    more_ = at_ < text_.size() && text_[at_] == ',';
    if (at_ >= text_.size()) return "the last line does not end in a line feed";
    if (text_[at_] == '\n') ++line_;
    ++at_;
    return nullptr;
  }

  const char* plain_field(std::string& value) {
    while (at_ < text_.size() && text_[at_] != ',' && text_[at_] != '\n') {
      if (text_[at_] == '"') return "a quote inside a field that is not quoted";
      if (const char* why = take(value)) return why;
    }
    return nullptr;
  }

  const char* quoted_field(std::string& value) {
    ++at_;
    while (at_ < text_.size()) {
      if (text_[at_] == '"') {
        ++at_;
        if (at_ < text_.size() && text_[at_] == '"') {
          value += '"';
          ++at_;
          continue;
        }
        if (at_ < text_.size() && text_[at_] != ',' && text_[at_] != '\n') return "text after a closing quote";
        return nullptr;
      }
      if (text_[at_] == '\n') ++line_;
      if (const char* why = take(value)) return why;
    }
    return "a quote that is not closed";
  }

  /// Moves one character into `value`.
  const char* take(std::string& value) {
    if (text_[at_] == '\r') return "a carriage return: lines end in a line feed";
    const auto length = utf8_length(text_, at_);
    if (length == 0) return "bytes that are not UTF-8";
    value.append(text_.substr(at_, length));
    at_ += length;
    return nullptr;
  }

  std::string_view text_;
  std::size_t at_ = 0;
  int line_ = 1;
  bool more_ = false;
  std::vector<CsvRecord> records_;
};

}  // namespace

Result<std::vector<CsvRecord>> read_csv(std::string_view text) {
  if (text.starts_with("\xEF\xBB\xBF")) return Error{ErrorClass::syntax, "a byte order mark", "line 1"};
  return CsvParser(text).run();
}

}  // namespace halostep
