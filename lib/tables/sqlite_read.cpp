#include "tables/sqlite_read.hpp"

#include <sqlite3.h>

#include <bit>
#include <cstring>
#include <stdexcept>

namespace halostep {
namespace {

/// A query read column after column. SQLiteCpp's Column counts a reference for every cell read;
/// at 10^5 cells per start that is felt, so rows are read with sqlite3 itself.
class Query {
 public:
  Query(sqlite3* db, const char* sql) : db_(db) {
    if (sqlite3_prepare_v2(db, sql, -1, &statement_, nullptr) != SQLITE_OK) {
      throw std::runtime_error(sqlite3_errmsg(db));
    }
  }
  ~Query() { sqlite3_finalize(statement_); }
  Query(const Query&) = delete;
  Query& operator=(const Query&) = delete;

  bool step() {
    column_ = 0;
    const int rc = sqlite3_step(statement_);
    if (rc != SQLITE_ROW && rc != SQLITE_DONE) throw std::runtime_error(sqlite3_errmsg(db_));
    return rc == SQLITE_ROW;
  }

  std::string blob() {
    const int i = column_++;
    const void* data = sqlite3_column_blob(statement_, i);
    const auto size = static_cast<std::size_t>(sqlite3_column_bytes(statement_, i));
    return data == nullptr ? std::string() : std::string(static_cast<const char*>(data), size);
  }
  Query& operator>>(std::string& v) {
    v = blob();
    return *this;
  }
  Query& operator>>(double& v) {
    v = sqlite3_column_double(statement_, column_++);
    return *this;
  }
  Query& operator>>(int& v) {
    v = sqlite3_column_int(statement_, column_++);
    return *this;
  }
  Query& operator>>(bool& v) {
    v = sqlite3_column_int(statement_, column_++) != 0;
    return *this;
  }
  Query& operator>>(std::optional<double>& v) {
    const int i = column_++;
    if (sqlite3_column_type(statement_, i) != SQLITE_NULL) v = sqlite3_column_double(statement_, i);
    return *this;
  }

 private:
  sqlite3* db_;
  sqlite3_stmt* statement_ = nullptr;
  int column_ = 0;
};

template <class Row, class Read>
void read_into(sqlite3* db, const char* sql, std::vector<Row>& rows, Read read) {
  Query q(db, sql);
  while (q.step()) {
    Row row;
    read(q, row);
    rows.push_back(std::move(row));
  }
}

void read_evidence(sqlite3* db, Table& t) {
  read_into(db, "SELECT name,citation,doi,doi_basis,kind,year FROM source ORDER BY id", t.sources,
            [](Query& q, SourceRow& r) { q >> r.id >> r.citation >> r.doi >> r.doi_basis >> r.kind >> r.year; });
  read_into(db,
            "SELECT molecule,radical,leaving,d298,u,coverage,method,provenance,note,reason,superseded,source "
            "FROM bond_row ORDER BY id",
            t.bond_rows, [](Query& q, BondRow& r) {
              q >> r.molecule >> r.radical >> r.leaving >> r.d298 >> r.u >> r.coverage >> r.method >> r.provenance >>
                  r.note >> r.reason >> r.superseded >> r.source;
            });
  read_into(db,
            "SELECT smiles,name,phase,dfh298,u,s298,cp298,coverage,method,provenance,note,reason,superseded,source "
            "FROM species_row ORDER BY id",
            t.species_rows, [](Query& q, SpeciesRow& r) {
              q >> r.smiles >> r.name >> r.phase >> r.dfh298 >> r.u >> r.s298 >> r.cp298 >> r.coverage >> r.method >>
                  r.provenance >> r.note >> r.reason >> r.superseded >> r.source;
            });
  read_into(db,
            "SELECT carrier,molecule,radical,reaction,type,unit,h_count,a,n,ea,k298,t_min,t_max,u_log10,coverage,"
            "method,provenance,note,reason,superseded,fitted,source FROM rate ORDER BY id",
            t.rates, [](Query& q, RateRow& r) {
              q >> r.carrier >> r.molecule >> r.radical >> r.reaction >> r.type >> r.unit >> r.h_count >> r.a >> r.n >>
                  r.ea >> r.k298 >> r.t_min >> r.t_max >> r.u_log10 >> r.coverage >> r.method >> r.provenance >>
                  r.note >> r.reason >> r.superseded >> r.fitted >> r.source;
            });
  read_into(db,
            "SELECT reagent,molecule,reference_molecule,radical,reference_radical,medium,ratio,t,u_log10,method,"
            "provenance,note,reason,superseded,fitted,source FROM relative_rate ORDER BY id",
            t.relative_rates, [](Query& q, RelativeRateRow& r) {
              q >> r.reagent >> r.molecule >> r.reference_molecule >> r.radical >> r.reference_radical >> r.medium >>
                  r.ratio >> r.t >> r.u_log10 >> r.method >> r.provenance >> r.note >> r.reason >> r.superseded >>
                  r.fitted >> r.source;
            });
  read_into(db,
            "SELECT reagent,molecule,product,medium,fraction,t,method,provenance,note,reason,superseded,fitted,source "
            "FROM mixture ORDER BY id",
            t.mixtures, [](Query& q, MixtureRow& r) {
              q >> r.reagent >> r.molecule >> r.product >> r.medium >> r.fraction >> r.t >> r.method >> r.provenance >>
                  r.note >> r.reason >> r.superseded >> r.fitted >> r.source;
            });
}

/// Adds the row numbers of a member table to its entries.
template <class Entry>
void read_members(sqlite3* db, const char* sql, std::vector<Entry>& entries) {
  Query q(db, sql);
  while (q.step()) {
    int entry = 0, row = 0;
    q >> entry >> row;
    if (entry < 0 || static_cast<std::size_t>(entry) >= entries.size()) throw std::runtime_error("a member without entry");
    entries[static_cast<std::size_t>(entry)].rows.push_back(row);
  }
}

void read_entries(sqlite3* db, Table& t) {
  read_into(db, "SELECT molecule,radical,leaving,combined,combined_u,d298,u,at_molecule,at_radical,at_leaving FROM bond ORDER BY id", t.bonds, [](Query& q, BondEntry& e) {
    q >> e.molecule >> e.radical >> e.leaving >> e.combined.value >> e.combined.u >> e.d298.value >> e.d298.u >>
        e.at_molecule >> e.at_radical >> e.at_leaving;
  });
  read_members(db, "SELECT bond,row FROM bond_member ORDER BY bond,row", t.bonds);
  read_into(db, "SELECT smiles,name,phase,combined,combined_u,dfh298,u,at,s298,cp298,u_s298,u_cp298 FROM species ORDER BY id", t.species,
            [](Query& q, SpeciesEntry& e) {
              std::optional<double> own, own_u, dfh, u;
              q >> e.smiles >> e.name >> e.phase >> own >> own_u >> dfh >> u >> e.at >> e.s298 >> e.cp298 >> e.u_s298 >> e.u_cp298;
              if (own && own_u) e.combined = Quantity{*own, *own_u};
              if (dfh && u) e.dfh298 = Quantity{*dfh, *u};
            });
  read_members(db, "SELECT species,row FROM species_member ORDER BY species,row", t.species);
}

void read_adjusted(sqlite3* db, Table& t) {
  read_into(db, "SELECT key,smiles,dfh298,datum,weight FROM adjusted ORDER BY id", t.adjusted,
            [](Query& q, AdjustedSpecies& s) { q >> s.key >> s.smiles >> s.dfh298 >> s.datum >> s.weight; });
  Query q(db, "SELECT species,other,covariance FROM adjusted_link ORDER BY species,other");
  while (q.step()) {
    int species = 0;
    AdjustedLink l;
    q >> species >> l.other >> l.covariance;
    if (species < 0 || static_cast<std::size_t>(species) >= t.adjusted.size()) throw std::runtime_error("a covariance without species");
    t.adjusted[static_cast<std::size_t>(species)].links.push_back(l);
  }
}

std::vector<double> doubles(const std::string& bytes) {
  std::vector<double> out(bytes.size() / 8);
  if constexpr (std::endian::native == std::endian::little) {
    if (!out.empty()) std::memcpy(out.data(), bytes.data(), out.size() * 8);
  } else {
    for (std::size_t i = 0; i < out.size(); ++i) {
      std::uint64_t bits = 0;
      for (std::size_t k = 8; k-- > 0;) bits = bits << 8 | static_cast<unsigned char>(bytes[8 * i + k]);
      out[i] = std::bit_cast<double>(bits);
    }
  }
  return out;
}

FittedModel& model_of(Table& t, int id) {
  if (id < 0 || static_cast<std::size_t>(id) >= t.models.size()) throw std::runtime_error("a parameter without model");
  return t.models[static_cast<std::size_t>(id)];
}

void read_models(sqlite3* db, Table& t) {
  read_into(db, "SELECT name,covariance FROM model ORDER BY id", t.models, [](Query& q, FittedModel& m) {
    q >> m.name;
    m.covariance = doubles(q.blob());
  });
  Query parameters(db, "SELECT model,name,value,support FROM model_parameter ORDER BY model,position");
  while (parameters.step()) {
    int id = 0, support = 0;
    std::string name;
    double value = 0;
    parameters >> id >> name >> value >> support;
    auto& m = model_of(t, id);
    m.parameters.push_back(std::move(name));
    m.values.push_back(value);
    m.support.push_back(support);
  }
  Query settings(db, "SELECT model,name,value FROM model_setting ORDER BY model,position");
  while (settings.step()) {
    int id = 0;
    std::pair<std::string, double> s;
    settings >> id >> s.first >> s.second;
    model_of(t, id).settings.push_back(std::move(s));
  }
}

}  // namespace

std::string read_meta(sqlite3* db, const char* key) {
  Query q(db, "SELECT key,value FROM meta");
  while (q.step()) {
    std::string found, value;
    q >> found >> value;
    if (found == key) return value;
  }
  throw std::runtime_error(std::string("no '") + key + "' in meta");
}

Table read_rows(sqlite3* db) {
  Table t;
  read_evidence(db, t);
  read_entries(db, t);
  read_adjusted(db, t);
  read_models(db, t);
  return t;
}

}  // namespace halostep
