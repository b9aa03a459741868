// From rows of evidence to one value per bond and per species.
#pragma once
#include <compare>
#include <string>
#include <vector>

#include "halostep/tables.hpp"
#include "tables/columns.hpp"

namespace halostep {

/// What one row of bond_rows is evidence for; canonical texts without stereo. Empty for a row at fault.
struct BondKey {
  std::string molecule, radical, leaving;
  friend auto operator<=>(const BondKey&, const BondKey&) = default;
};

/// The same for a row of species_rows: `key` is equal for resonance forms, `canonical` is the row's own text.
struct SpeciesKey {
  std::string key, canonical;
};

/// Fills Table::bonds. The value is combine() of the current rows (DerSimonian-Laird); superseded rows are listed
/// among the rows and not combined; a bond without a current row gets no entry. keys[i] and places[i] belong to
/// bond_rows[i]. A current row more than 3 combined u off the combined value of the bond's other current rows is a
/// fault unless it has a note.
void combine_bonds(Table& table, const std::vector<BondKey>& keys, const std::vector<RowPlace>& places, Faults& faults);

/// Fills Table::species. Enthalpies are combined like bonds. S and Cp are not averaged, since one misprint would
/// spoil them unseen: each is taken from the first current row of the best method, in the order evaluated, measured,
/// derived, computed, then of the file. Name and text are those of the first current row.
void combine_species(Table& table, const std::vector<SpeciesKey>& keys);

}  // namespace halostep
