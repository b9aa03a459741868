// The engine: from a structure to bonds, steps and outcome. Immutable after opening; const calls are thread-safe.
#pragma once
#include <memory>
#include <optional>
#include <span>
#include <string>
#include <vector>

#include "halostep/molecule.hpp"
#include "halostep/quantity.hpp"
#include "halostep/tables.hpp"

namespace halostep {

enum class Halogen { F, Cl, Br, I };
inline constexpr Halogen kAllHalogens[] = {Halogen::F, Halogen::Cl, Halogen::Br, Halogen::I};
/// "F", "Cl", "Br", "I".
const char* halogen_name(Halogen x) noexcept;
/// Atomic number.
int halogen_element(Halogen x) noexcept;
/// Errors: usage (lists the known ones).
Result<Halogen> parse_halogen(std::string_view text);

/// How an answer was obtained: from rows of this very bond and what is tied to them by the joint adjustment, from the
/// adjusted enthalpies of its parts alone, or from the fitted types.
enum class Route { measured, adjusted, typed };
const char* route_name(Route r) noexcept;

/// One term of an answer: a row of evidence (measured) or a correction of the typed model.
struct Contribution {
  std::string name;      // "blanksby2003, evaluated" or "alkyl"
  double count = 1.0;    // how often the correction applies; weight (0..1) of a row of evidence
  Quantity value;        // kJ/mol: the row's D, or count times the correction
  int support = 0;       // rows of evidence behind the correction
};

/// One kind of bond of a molecule (all equivalent bonds together). Energies in kJ/mol at 298.15 K, gas.
struct BondAnswer {
  std::string bond;                  // "C-H", "O-H", "C-Cl", "O-O"
  int atom = 0;                      // first centre; for C-X the carbon
  int partner = -1;                  // the other atom of a bond between heavy atoms
  std::vector<int> atoms;            // all equivalent centres
  int h_count = 0;                   // equivalent hydrogens; 0 for bonds without H
  int bond_count = 0;                // equivalent bonds
  std::string radical;               // SMILES of the radical formed (the carbon part for C-X)
  std::string type;
  std::optional<Quantity> d298;      // D, absent with `why`
  Route route = Route::typed;
  bool extrapolated = false;         // thin support: u is widened
  std::vector<int> sources;          // indices into Table::sources
  std::vector<Contribution> contributions;
  std::optional<Error> why;          // why there is no d298, or what the answer leaves out
};

struct BondOptions {
  bool typed = false;     // force the typed route
  bool details = true;    // off: enthalpies, rates and shares only; no texts, sources, contributions, entropies of steps
};

enum class StepKind { initiation, abstraction, transfer, net, termination, elementary };
const char* step_kind_name(StepKind k) noexcept;

/// One reaction step. Gas, 1 bar. dh is at 298.15 K; ds, dg, log10_k at `temperature`.
struct StepAnswer {
  std::optional<Halogen> halogen;
  StepKind kind = StepKind::elementary;
  std::string reaction;              // reaction SMILES
  std::string radical;               // the site, where one is meant; else empty
  double temperature = kReferenceTemperature;   // K
  std::optional<Quantity> dh;        // kJ/mol, 298.15 K
  std::optional<Quantity> ds;        // J mol-1 K-1
  std::optional<Quantity> dg;        // kJ/mol
  std::optional<Quantity> log10_k;   // log10 of K (1 bar standard state)
  std::optional<Quantity> ea;        // kJ/mol, Arrhenius, at `temperature`; abstraction at C-H and its reverse
  std::optional<double> k_cm3_s;     // rate coefficient of all equivalent H, cm3 molecule-1 s-1
  double u_log10_k_cm3_s = 0;        // standard uncertainty of its log10
  bool balanced = true;
  std::vector<int> sources;
  std::string route;                 // of dh: "joint adjustment", "typed", "joint adjustment and typed"
  std::string why_dh, why_ds, why_ea;  // why a value is absent; empty when present
};

/// Parts of ln(k_a/k_b) for two sites, all per molecule; they add up to `ln_ratio`.
struct Selectivity {
  int a = 0, b = 0;                  // indices into HalogenOutcome::sites
  double ln_ratio = 0;
  double enthalpy = 0;               // mean transition-state position times the difference of step enthalpies, over RT
  double curvature = 0;              // remainder of the barrier form beyond its mean slope
  double polar = 0;                  // polar term
  double statistical = 0;            // numbers of H
  double a_factor = 0;               // per-H pre-exponential factors and offsets of the classes of C-H
  double encounter = 0;              // what the encounter limit takes away; it is one factor for the whole molecule,
                                     // so 0 between two sites of one molecule
  double medium = 0;                 // what attack by the complexed atom adds
  double reversal = 0;               // what R + HX takes back at the conversion asked for
};

struct SiteOutcome {
  int atom = 0;
  std::vector<int> atoms;
  int h_count = 0;
  std::string radical, type;
  Quantity dh;                       // step enthalpy of abstraction, kJ/mol, 298.15 K
  double k_cm3_s = 0;                // all H of the site
  double u_log10_k = 0;              // standard uncertainty of log10 k
  double ea = 0, u_ea = 0;           // Arrhenius activation energy at T, kJ/mol (may be negative)
  double a_cm3_s = 0;                // Arrhenius A at T, all H of the site
  double ts_position = 0, u_ts_position = 0;  // 0 reactant-like to 1 product-like
  double share = 0, share_low = 0, share_high = 0;  // over C-H sites; 95 % range
  double complexed = 0;              // part of the attack on this site that the complexed atom makes
  std::optional<double> forward;     // part of its radicals that become halide, the rest takes H back from HX; absent
  std::string why_forward;           // with `why_forward`
  bool extrapolated = false;         // T or structure outside the evidence
  std::string why_extrapolated;
};

/// A C-H site without a rate; the shares leave it out.
struct RefusedSite {
  int h_count = 0;
  std::string radical, type, why;
};

struct HalogenOutcome {
  Halogen halogen = Halogen::Cl;
  double temperature = kReferenceTemperature;
  std::vector<SiteOutcome> sites;    // as the bonds, in order of first atom
  std::vector<RefusedSite> refused;  // C-H sites outside the domain
  std::vector<Selectivity> selectivity;  // largest site against each other site
  double k_total = 0;                // cm3 molecule-1 s-1, C-H sites
  std::optional<Quantity> slope;     // fitted straight Evans-Polanyi slope alpha; absent with fewer than three rates
  std::string slope_over;            // what it was fitted over: "alkanes" or "hydrocarbons"
  std::string medium;                // "gas", "neat", "benzene 8 M"
  double conversion = 0;             // of the substrate, 0 to 1
  double hx_per_x2 = 0;              // at that conversion
  std::vector<std::string> notes;    // competing channels and cautions
  std::vector<int> sources;          // behind the rates, the bonds and D(H-X)
};

/// Where the atom attacks. Complexing solvents make chlorine atoms slower and more selective.
struct Medium {
  std::string solvent = "gas";
  double molarity = 0;               // mol/L; 0 for inert media, where it does not matter
  bool complexing = false;
};

struct OutcomeOptions {
  bool typed = false;
  bool details = true;
  std::string medium = "gas";        // as Engine::medium() reads it
  double conversion = 0;             // of the substrate; shares are those at that moment
  double halogen_ratio = 1;          // X2 per substrate at the start
};

/// What is wrong with a conversion and X2 per substrate at the start, or nothing.
std::optional<Error> check_conversion(double conversion, double halogen_ratio);

/// Everything about one molecule at one temperature, worked out together.
struct Study {
  std::vector<BondAnswer> bonds;
  std::vector<StepAnswer> steps;
  std::vector<HalogenOutcome> halogens;  // empty when no C-H site lies inside the domain
};

class Engine {
 public:
  /// Opens the table (see open_table) and prepares look-ups. Errors: table, io.
  static Result<Engine> open(const std::string& table_path = {});
  /// Over a table already loaded.
  static Result<Engine> from_table(Table table);
  Engine(Engine&&) noexcept;
  Engine& operator=(Engine&&) noexcept;
  ~Engine();

  [[nodiscard]] const Table& table() const noexcept;

  /// Every X-H bond (C, O, N, S, Si, ...) and every C-X and weak bond. A bond outside the domain is listed
  /// with `why` and without a value. Errors: domain (no bond could be answered), isotope.
  [[nodiscard]] Result<std::vector<BondAnswer>> bonds(const Molecule& m, const BondOptions& o = {}) const;

  /// Chain steps for each halogen: initiation, abstraction and transfer per X-H site (C, N, O, Si, S ...), net,
  /// terminations. Barriers and rates are of C-H sites. Errors: domain (no X-H bond).
  [[nodiscard]] Result<std::vector<StepAnswer>> steps(const Molecule& m, std::span<const Halogen> halogens,
                                                      double temperature, const BondOptions& o = {}) const;

  /// Reads "benzene 8 M", "CS2 12 M", "neat", "gas", "CCl4". Errors: usage (unknown solvent: lists the known ones; a
  /// complexing one without its molarity, or more of it than the pure liquid holds).
  [[nodiscard]] Result<Medium> medium(std::string_view text) const;

  /// One elementary step as reaction SMILES, checked for balance. Errors: reaction, unbalanced, no_data.
  [[nodiscard]] Result<StepAnswer> reaction(std::string_view text, double temperature) const;

  /// Rates and shares of the C-H sites for each halogen. Rates are those of the free atom in the gas; medium and
  /// conversion act on the shares. Errors: domain (no C-H site inside the domain), usage (medium, conversion).
  [[nodiscard]] Result<std::vector<HalogenOutcome>> outcome(const Molecule& m, std::span<const Halogen> halogens,
                                                            double temperature, const OutcomeOptions& o = {}) const;

  /// bonds(), steps() and outcome() in one go, faster than the three calls. Errors: as bonds().
  [[nodiscard]] Result<Study> study(const Molecule& m, std::span<const Halogen> halogens, double temperature,
                                    const BondOptions& o = {}) const;

  struct Impl;

 private:
  explicit Engine(std::unique_ptr<const Impl> impl);
  std::unique_ptr<const Impl> impl_;
};

}  // namespace halostep
