// A small sound table in a directory of its own, to be spoiled by tests.
#pragma once
#include <unistd.h>

#include <filesystem>
#include <fstream>
#include <iterator>
#include <string>
#include <string_view>
#include <vector>

#include "tables/faults.hpp"
#include "tables/read_tables.hpp"

namespace halostep::test {

inline std::string read_file(const std::filesystem::path& path) {
  std::ifstream in(path, std::ios::binary);
  return {std::istreambuf_iterator<char>(in), {}};
}

inline void write_file(const std::filesystem::path& path, std::string_view text) {
  std::ofstream(path, std::ios::binary) << text;
}

/// A directory that is gone after the test.
class TempDir {
 public:
  TempDir() {
    auto name = (std::filesystem::temp_directory_path() / "halostep-test-XXXXXX").string();
    path_ = ::mkdtemp(name.data());
  }
  ~TempDir() {
    std::error_code ec;
    std::filesystem::remove_all(path_, ec);
  }
  TempDir(const TempDir&) = delete;
  TempDir& operator=(const TempDir&) = delete;
  [[nodiscard]] std::string operator/(std::string_view file) const { return (path_ / file).string(); }
  [[nodiscard]] std::string text() const { return path_.string(); }

 private:
  std::filesystem::path path_;
};

/// The values are invented; only their form matters here.
class SmallTable {
 public:
  SmallTable() {
    add("file_list.txt",
        "sources.csv\nbonds_rh.csv\nbonds_rx.csv\nspecies.csv\nrates_abstraction.csv\nrates_other.csv\n"
        "relative_rates.csv\nmixtures.csv\nleft_out.csv\n");
    add("sources.csv",
        "id,citation,year,doi,doi_basis,kind\nalpha2001,First,2001,10.1000/a,read,measurement\n"
        "beta,Second,,,,evaluation\n");
    add("bonds_rh.csv",
        "molecule,radical,d298,unit,u,coverage,method,provenance,source,status,reason,note\n"
        "C,[CH3],439,kJ/mol,1,1s,measured,read,alpha2001,current,,\n"
        "C,[CH3],440,kJ/mol,1,95%,evaluated,memory,beta,current,,\n"
        "CC=C,[CH2]C=C,370,kJ/mol,2,none,evaluated,read,beta,current,,\n"
        "Cl,[Cl],103.15,kcal/mol,0.1,unstated,evaluated,read,beta,current,,\n");
    add("bonds_rx.csv",
        "molecule,radical,leaving,d298,unit,u,coverage,method,provenance,source,status,reason,note\n"
        "CCl,[CH3],[Cl],350,kJ/mol,2,none,derived,read,alpha2001,current,,\n"
        "COOC,C[O],C[O],160,kJ/mol,4,none,derived,read,alpha2001,current,,\n");
    add("species.csv",
        "smiles,name,phase,dfh298,unit,u,coverage,s298,cp298,method,provenance,source,status,reason,note\n"
        "C,methane,g,-74.6,kJ/mol,0.1,95%,186.3,35.7,evaluated,read,beta,current,,\n"
        "C,methane,g,,kJ/mol,,,186.2,,measured,read,alpha2001,current,,\n");
    add("rates_abstraction.csv",
        "carrier,molecule,radical,h_count,a,n,ea,t_min,t_max,k298,u_log10,coverage,method,provenance,source,status,"
        "reason,use,note\n"
        "Cl,C,[CH3],4,1e-11,0,10,200,300,1.767e-13,0.1,none,measured,read,alpha2001,current,,fit,\n"
        "Cl,CC,total,6,,,,,,5.9e-11,0.1,none,measured,read,alpha2001,current,,show,why\n");
    add("rates_other.csv",
        "reaction,type,a,n,ea,unit,t_min,t_max,k298,u_log10,coverage,method,provenance,source,status,reason,note\n"
        "[CH3].ClCl>>CCl.[Cl],halogen-transfer,5e-12,0,2,cm3,,,,0.1,none,measured,read,alpha2001,current,,\n");
    add("relative_rates.csv",
        "reagent,molecule,reference_molecule,radical,reference_radical,ratio_per_h,t,medium,u_log10,method,provenance,"
        "source,status,reason,use,note\n"
        "Cl2,CCC,CCC,C[CH]C,CC[CH2],3.9,300,gas,0.1,measured,read,alpha2001,current,,fit,\n");
    add("mixtures.csv",
        "reagent,molecule,product,fraction,t,medium,method,provenance,source,status,reason,use,note\n"
        "Cl2,CCC,CCCCl,0.45,298.15,gas,measured,read,alpha2001,current,,fit,\n"
        "Cl2,CCC,CC(C)Cl,0.55,298.15,gas,measured,read,alpha2001,current,,fit,\n");
    add("left_out.csv", "file,key,value,source,reason\nbonds_rh.csv,C,430,someone,too old\n");
  }

  /// Replaces `from` in `file` (all of it when `from` is empty); false when it is not there.
  bool edit(const std::string& file, const std::string& from, const std::string& to) {
    auto text = read_file(dir_ / file);
    if (from.empty()) {
      text = to;
    } else {
      const auto at = text.find(from);
      if (at == std::string::npos) return false;
      text.replace(at, from.size(), to);
    }
    write_file(dir_ / file, text);
    return true;
  }
  void add(const std::string& file, std::string_view text) { write_file(dir_ / file, text); }
  /// Appends a line.
  void append(const std::string& file, const std::string& line) {
    write_file(dir_ / file, read_file(dir_ / file) + line + "\n");
  }
  Curated read(Faults& faults) const { return read_tables(dir_.text(), faults); }
  [[nodiscard]] std::string dir() const { return dir_.text(); }

 private:
  TempDir dir_;
};

}  // namespace halostep::test
