#include <SQLiteCpp/SQLiteCpp.h>
#include <fmt/format.h>
#include <unistd.h>

#include <bit>
#include <cstdio>
#include <filesystem>

#include "tables/table_io.hpp"

namespace halostep {
namespace {

/// An INSERT with one place per value; values are bound in order.
class Insert {
 public:
  Insert(SQLite::Database& db, const char* table, int columns) : statement_(db, text(table, columns)) {}

  template <class... T>
  void operator()(const T&... values) {
    int place = 0;
    (bind(++place, values), ...);
    statement_.exec();
    statement_.reset();
  }

 private:
  static std::string text(const char* table, int columns) {
    std::string places = "?";
    for (int i = 1; i < columns; ++i) places += ",?";
    return fmt::format("INSERT INTO {} VALUES ({})", table, places);
  }
  void bind(int place, const std::string& v) { statement_.bind(place, v); }
  void bind(int place, double v) { statement_.bind(place, v); }
  void bind(int place, int v) { statement_.bind(place, v); }
  void bind(int place, bool v) { statement_.bind(place, v ? 1 : 0); }
  void bind(int place, const std::optional<double>& v) {
    if (v) {
      statement_.bind(place, *v);
    } else {
      statement_.bind(place);
    }
  }
  SQLite::Statement statement_;
};

/// Calls write(id, row) for each row.
template <class Row, class Write>
void each(const std::vector<Row>& rows, Write write) {
  for (std::size_t i = 0; i < rows.size(); ++i) write(static_cast<int>(i), rows[i]);
}

void write_evidence(SQLite::Database& db, const Table& t) {
  Insert source(db, "source", 7);
  each(t.sources, [&](int id, const SourceRow& r) { source(id, r.id, r.citation, r.doi, r.doi_basis, r.kind, r.year); });
  Insert bond(db, "bond_row", 13);
  each(t.bond_rows, [&](int id, const BondRow& r) {
    bond(id, r.molecule, r.radical, r.leaving, r.d298, r.u, r.coverage, r.method, r.provenance, r.note, r.reason,
         r.superseded, r.source);
  });
  Insert species(db, "species_row", 15);
  each(t.species_rows, [&](int id, const SpeciesRow& r) {
    species(id, r.smiles, r.name, r.phase, r.dfh298, r.u, r.s298, r.cp298, r.coverage, r.method, r.provenance, r.note,
            r.reason, r.superseded, r.source);
  });
  Insert rate(db, "rate", 23);
  each(t.rates, [&](int id, const RateRow& r) {
    rate(id, r.carrier, r.molecule, r.radical, r.reaction, r.type, r.unit, r.h_count, r.a, r.n, r.ea, r.k298, r.t_min,
         r.t_max, r.u_log10, r.coverage, r.method, r.provenance, r.note, r.reason, r.superseded, r.fitted, r.source);
  });
  Insert relative(db, "relative_rate", 17);
  each(t.relative_rates, [&](int id, const RelativeRateRow& r) {
    relative(id, r.reagent, r.molecule, r.reference_molecule, r.radical, r.reference_radical, r.medium, r.ratio, r.t,
             r.u_log10, r.method, r.provenance, r.note, r.reason, r.superseded, r.fitted, r.source);
  });
  Insert mixture(db, "mixture", 14);
  each(t.mixtures, [&](int id, const MixtureRow& r) {
    mixture(id, r.reagent, r.molecule, r.product, r.medium, r.fraction, r.t, r.method, r.provenance, r.note, r.reason,
            r.superseded, r.fitted, r.source);
  });
}

void write_entries(SQLite::Database& db, const Table& t) {
  Insert bond(db, "bond", 11), bond_member(db, "bond_member", 2);
  each(t.bonds, [&](int id, const BondEntry& e) {
    bond(id, e.molecule, e.radical, e.leaving, e.combined.value, e.combined.u, e.d298.value, e.d298.u, e.at_molecule,
         e.at_radical, e.at_leaving);
    for (const int row : e.rows) bond_member(id, row);
  });
  Insert species(db, "species", 13), species_member(db, "species_member", 2);
  each(t.species, [&](int id, const SpeciesEntry& e) {
    std::optional<double> own, own_u, dfh, u;
    if (e.combined) own = e.combined->value, own_u = e.combined->u;
    if (e.dfh298) dfh = e.dfh298->value, u = e.dfh298->u;
    species(id, e.smiles, e.name, e.phase, own, own_u, dfh, u, e.at, e.s298, e.cp298, e.u_s298, e.u_cp298);
    for (const int row : e.rows) species_member(id, row);
  });
}

void write_adjusted(SQLite::Database& db, const Table& t) {
  Insert species(db, "adjusted", 6), link(db, "adjusted_link", 3);
  each(t.adjusted, [&](int id, const AdjustedSpecies& s) {
    species(id, s.key, s.smiles, s.dfh298, s.datum, s.weight);
    for (const auto& l : s.links) link(id, l.other, l.covariance);
  });
}

std::string little_endian(const std::vector<double>& values) {
  std::string out;
  out.reserve(values.size() * 8);
  for (const double v : values) {
    const auto bits = std::bit_cast<std::uint64_t>(v + 0.0);
    for (unsigned shift = 0; shift < 64; shift += 8) out += static_cast<char>(bits >> shift & 0xFFU);
  }
  return out;
}

void write_models(SQLite::Database& db, const Table& t) {
  Insert parameter(db, "model_parameter", 5), setting(db, "model_setting", 4);
  each(t.models, [&](int id, const FittedModel& m) {
    SQLite::Statement model(db, "INSERT INTO model VALUES (?,?,?)");
    const std::string blob = little_endian(m.covariance);
    model.bind(1, id);
    model.bind(2, m.name);
    // A zero-length blob must be bound with a pointer, or it is stored as NULL.
    model.bind(3, static_cast<const void*>(blob.data()), static_cast<int>(blob.size()));
    model.exec();
    for (std::size_t i = 0; i < m.parameters.size(); ++i) {
      parameter(id, static_cast<int>(i), m.parameters[i], m.values[i], m.support[i]);
    }
    for (std::size_t i = 0; i < m.settings.size(); ++i) {
      setting(id, static_cast<int>(i), m.settings[i].first, m.settings[i].second);
    }
  });
}

void write_all(const Table& table, std::string_view schema_sql, const std::string& path) {
  SQLite::Database db(path, SQLite::OPEN_READWRITE | SQLite::OPEN_CREATE);
  db.exec("PRAGMA page_size = 4096; PRAGMA journal_mode = OFF; PRAGMA synchronous = OFF; PRAGMA foreign_keys = ON;");
  db.exec("BEGIN");
  db.exec(std::string(schema_sql));
  Insert meta(db, "meta", 2);
  meta(std::string("layout"), std::to_string(kTableLayout));
  Table dumped = table;
  dumped.layout = kTableLayout;
  meta(std::string("content_hash"), content_hash(dumped));
  write_evidence(db, table);
  write_entries(db, table);
  write_adjusted(db, table);
  write_models(db, table);
  db.exec("COMMIT");
}

}  // namespace

std::optional<Error> write_table(const Table& table, std::string_view schema_sql, const std::string& path) {
  const std::string part = fmt::format("{}.{}.part", path, ::getpid());
  std::error_code ec;
  std::filesystem::remove(part, ec);
  try {
    write_all(table, schema_sql, part);
  } catch (const std::exception& e) {
    std::filesystem::remove(part, ec);
    return Error{ErrorClass::table, fmt::format("cannot write the table '{}': {}", path, e.what()), path};
  }
  std::filesystem::rename(part, path, ec);
  if (!ec) return std::nullopt;
  const std::string why = ec.message();
  std::filesystem::remove(part, ec);
  return Error{ErrorClass::io, fmt::format("cannot put the new table at '{}': {}", path, why), path};
}

}  // namespace halostep
