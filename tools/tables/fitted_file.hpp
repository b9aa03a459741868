// fitted.json: the fitted models as checked in beside the rows they come from.
#pragma once
#include <optional>
#include <string>
#include <vector>

#include "halostep/tables.hpp"

namespace halostep {

inline constexpr const char* kFittedFile = "fitted.json";

struct FittedFile {
  std::string input_hash;
  std::vector<FittedModel> models;
};

/// SHA-256 of all rows and combined values of `table`, without adjusted ones and models.
std::string input_hash(const Table& table);

/// The document as text: one row of a covariance (lower triangle) a line, numbers with 17 digits, so that reading
/// gives the same doubles back.
std::string fitted_text(const FittedFile& file);
/// Errors: table (not JSON, a part missing, sizes that do not match); the message says which.
Result<FittedFile> parse_fitted(const std::string& text);

/// Errors: io, and those of parse_fitted.
Result<FittedFile> read_fitted(const std::string& path);
/// Writes beside `path` and renames, so that `path` is never half written.
std::optional<Error> write_fitted(const FittedFile& file, const std::string& path);

/// What differs between the models checked in and those fitted now: names and supports must be equal; values,
/// settings and covariances within 1e-8 of the largest entry of their kind in the model. One line per difference.
std::vector<std::string> model_differences(const std::vector<FittedModel>& stored,
                                           const std::vector<FittedModel>& fitted);

}  // namespace halostep
