#include <bit>
#include <cstdint>

#include "tables/table_io.hpp"

namespace halostep {
namespace {

class Dump {
 public:
  Dump& operator<<(std::string_view s) {
    *this << static_cast<std::int64_t>(s.size());
    out_ += s;
    return *this;
  }
  Dump& operator<<(const std::string& s) { return *this << std::string_view(s); }
  Dump& operator<<(std::int64_t v) {
    const auto bits = static_cast<std::uint64_t>(v);
    for (unsigned shift = 0; shift < 64; shift += 8) out_ += static_cast<char>(bits >> shift & 0xFFU);
    return *this;
  }
  Dump& operator<<(int v) { return *this << static_cast<std::int64_t>(v); }
  Dump& operator<<(std::size_t v) { return *this << static_cast<std::int64_t>(v); }
  Dump& operator<<(bool v) { return *this << static_cast<std::int64_t>(v ? 1 : 0); }
  // SQLite keeps no negative zero: + 0.0 makes it positive.
  Dump& operator<<(double v) { return *this << std::bit_cast<std::int64_t>(v + 0.0); }
  template <class T>
  Dump& operator<<(const std::optional<T>& v) {
    out_ += v ? '\1' : '\0';
    return v ? *this << *v : *this;
  }
  Dump& operator<<(const Quantity& q) { return *this << q.value << q.u; }
  template <class T>
  Dump& operator<<(const std::vector<T>& v) {
    *this << v.size();
    for (const auto& x : v) *this << x;
    return *this;
  }

  Dump& operator<<(const SourceRow& r) {
    return *this << r.id << r.citation << r.doi << r.doi_basis << r.kind << r.year;
  }
  Dump& operator<<(const BondRow& r) {
    *this << r.molecule << r.radical << r.leaving << r.d298 << r.u << r.coverage;
    return tail(r);
  }
  Dump& operator<<(const BondEntry& r) { return *this << r.molecule << r.radical << r.leaving << r.combined << r.d298 << r.at_molecule << r.at_radical << r.at_leaving << r.rows; }
  Dump& operator<<(const SpeciesRow& r) {
    *this << r.smiles << r.name << r.phase << r.coverage << r.dfh298 << r.u << r.s298 << r.cp298;
    return tail(r);
  }
  Dump& operator<<(const SpeciesEntry& r) {
    return *this << r.smiles << r.name << r.phase << r.combined << r.dfh298 << r.at << r.s298 << r.cp298 << r.u_s298 << r.u_cp298 << r.rows;
  }
  Dump& operator<<(const AdjustedLink& r) { return *this << r.other << r.covariance; }
  Dump& operator<<(const AdjustedSpecies& r) {
    return *this << r.key << r.smiles << r.dfh298 << r.datum << r.weight << r.links;
  }
  Dump& operator<<(const RateRow& r) {
    *this << r.carrier << r.molecule << r.radical << r.reaction << r.type << r.unit << r.h_count << r.a << r.ea
          << r.k298 << r.t_min << r.t_max << r.n << r.u_log10 << r.coverage << r.fitted;
    return tail(r);
  }
  Dump& operator<<(const RelativeRateRow& r) {
    *this << r.reagent << r.molecule << r.reference_molecule << r.radical << r.reference_radical << r.medium << r.ratio
          << r.t << r.u_log10 << r.fitted;
    return tail(r);
  }
  Dump& operator<<(const MixtureRow& r) {
    *this << r.reagent << r.molecule << r.product << r.medium << r.fraction << r.t << r.fitted;
    return tail(r);
  }
  Dump& operator<<(const std::pair<std::string, double>& p) { return *this << p.first << p.second; }
  Dump& operator<<(const FittedModel& m) {
    return *this << m.name << m.parameters << m.values << m.support << m.covariance << m.settings;
  }

  std::string take() { return std::move(out_); }
  void reserve(std::size_t bytes) { out_.reserve(bytes); }

 private:
  /// What every row of evidence ends in.
  template <class Row>
  Dump& tail(const Row& r) {
    return *this << r.method << r.provenance << r.note << r.reason << r.superseded << r.source;
  }
  std::string out_;
};

}  // namespace

std::string canonical_dump(const Table& t) {
  Dump d;
  d.reserve(std::size_t{1} << 21);
  d << t.layout << t.sources << t.bond_rows << t.bonds << t.species_rows << t.species << t.adjusted << t.rates << t.relative_rates
    << t.mixtures << t.models;
  return d.take();
}

std::string content_hash(const Table& table) { return sha256_hex(canonical_dump(table)); }

}  // namespace halostep
