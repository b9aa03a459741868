// rates_abstraction.csv, rates_other.csv, relative_rates.csv and mixtures.csv. Each function returns the lines read.
#pragma once
#include <string>

#include "tables/evidence.hpp"
#include "tables/structures.hpp"

namespace halostep {

/// Into Table::rates, type "abstraction".
std::size_t read_abstraction(const std::string& dir, Table& table, SourceBook& sources, Structures& structures,
                             Faults& faults);
/// Into Table::rates, behind the abstraction rows; never fitted.
std::size_t read_other_rates(const std::string& dir, Table& table, SourceBook& sources, Faults& faults);
/// Into Table::relative_rates.
std::size_t read_relative_rates(const std::string& dir, Table& table, SourceBook& sources, Structures& structures,
                                Faults& faults);
/// Into Table::mixtures.
std::size_t read_mixtures(const std::string& dir, Table& table, SourceBook& sources, Structures& structures,
                          Faults& faults);

}  // namespace halostep
