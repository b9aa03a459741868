#include "tables/reliability.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

namespace halostep {
namespace {

constexpr double kLeft = 80, kTop = 60, kSide = 440, kWidth = 880, kHeight = 580;
constexpr double kLegendLeft = kLeft + kSide + 40, kLegendStep = 44;

double x_of(double percent) { return kLeft + kSide * percent / 100; }
double y_of(double percent) { return kTop + kSide * (1 - percent / 100); }

struct Style {
  const char *dash, *mark;  // SVG dash array; outline of the mark about the origin
};
const Style kStyles[] = {
    {"none", "M-4,-4H4V4H-4Z"},
    {"9 4", "M0,-5.5L5,4H-5Z"},
    {"2 4", "M0,-5.5L5.5,0L0,5.5L-5.5,0Z"},
    {"10 4 2 4", "M-4.5,0A4.5,4.5 0 1 0 4.5,0A4.5,4.5 0 1 0 -4.5,0Z"},
};

std::string text(double x, double y, const char* anchor, const std::string& what, const char* more = "") {
  return fmt::format("<text x=\"{:.1f}\" y=\"{:.1f}\" text-anchor=\"{}\"{}>{}</text>\n", x, y, anchor, more, what);
}

std::string line(double x1, double y1, double x2, double y2, const char* style) {
  return fmt::format("<line x1=\"{:.1f}\" y1=\"{:.1f}\" x2=\"{:.1f}\" y2=\"{:.1f}\" {}/>\n", x1, y1, x2, y2, style);
}

// Where 19 of 20 samples of `rows` fall when the intervals are exact (normal approximation of the binomial law).
std::string band(std::size_t rows) {
  std::string up, down;
  for (int p = 0; p <= 100; p += 2) {
    const double half = 196 * std::sqrt(p / 100.0 * (1 - p / 100.0) / static_cast<double>(rows));
    up += fmt::format("{}{:.1f},{:.1f}", p ? "L" : "M", x_of(p), y_of(std::min(100.0, p + half)));
    down = fmt::format("L{:.1f},{:.1f}", x_of(p), y_of(std::max(0.0, p - half))) + down;
  }
  return fmt::format("<path d=\"{}{}Z\" fill=\"#e4e4e4\"/>\n", up, down);
}

std::string axes() {
  std::string out = fmt::format(
      "<rect x=\"{:.1f}\" y=\"{:.1f}\" width=\"{:.1f}\" height=\"{:.1f}\" fill=\"none\" stroke=\"#000\"/>\n", kLeft,
      kTop, kSide, kSide);
  for (int p = 0; p <= 100; p += 20) {
    out += line(x_of(p), y_of(0), x_of(p), y_of(0) + 6, "stroke=\"#000\"");
    out += line(x_of(0) - 6, y_of(p), x_of(0), y_of(p), "stroke=\"#000\"");
    out += text(x_of(p), y_of(0) + 22, "middle", fmt::format("{}", p));
    out += text(x_of(0) - 11, y_of(p) + 5, "end", fmt::format("{}", p));
  }
  out += line(x_of(0), y_of(0), x_of(100), y_of(100), "stroke=\"#777\" stroke-width=\"1\"");
  out += text(x_of(50), y_of(0) + 48, "middle", "nominal coverage of the interval, %");
  const auto turn = fmt::format(" transform=\"rotate(-90 {:.1f} {:.1f})\"", kLeft - 50, y_of(50));
  return out + text(kLeft - 50, y_of(50), "middle", "values inside, %", turn.c_str());
}

std::string mark(double x, double y, const Style& s) {
  return fmt::format(
      "<path transform=\"translate({:.1f} {:.1f})\" d=\"{}\" fill=\"#fff\" stroke=\"#000\" stroke-width=\"1.4\"/>\n", x,
      y, s.mark);
}

std::string stroke(const Style& s) {
  return fmt::format("fill=\"none\" stroke=\"#000\" stroke-width=\"1.6\" stroke-dasharray=\"{}\"", s.dash);
}

std::string curve(const ReliabilityCurve& c, const Style& s) {
  std::string path, marks;
  for (std::size_t i = 0; i < kNominal.size(); ++i) {
    const double x = x_of(kNominal[i]), y = y_of(c.observed[i]);
    path += fmt::format("{}{:.1f},{:.1f}", i ? "L" : "M", x, y);
    marks += mark(x, y, s);
  }
  return fmt::format("<path d=\"{}\" {}/>\n", path, stroke(s)) + marks;
}

std::string legend(const std::vector<ReliabilityCurve>& curves) {
  std::string out;
  double y = kTop + 20;
  for (std::size_t i = 0; i < curves.size(); ++i, y += kLegendStep) {
    const auto& s = kStyles[i % std::size(kStyles)];
    out += line(kLegendLeft, y, kLegendLeft + 50, y, stroke(s).c_str()) + mark(kLegendLeft + 25, y, s);
    out += text(kLegendLeft + 62, y + 5, "start", curves[i].name);
    out += text(kLegendLeft + 62, y + 22, "start", fmt::format("{} values", curves[i].rows), " font-size=\"12\"");
  }
  out += line(kLegendLeft, y, kLegendLeft + 50, y, "stroke=\"#777\" stroke-width=\"1\"");
  out += text(kLegendLeft + 62, y + 5, "start", "exact");
  out += fmt::format("<rect x=\"{:.1f}\" y=\"{:.1f}\" width=\"50\" height=\"16\" fill=\"#e4e4e4\"/>\n", kLegendLeft,
                     y + kLegendStep - 8);
  out += text(kLegendLeft + 62, y + kLegendStep + 5, "start",
              fmt::format("chance, {} values, 19 of 20", curves.front().rows));
  return out;
}

}  // namespace

ReliabilityCurve reliability(std::string name, const std::vector<double>& z) {
  ReliabilityCurve c{std::move(name), z.size(), {}};
  for (std::size_t i = 0; i < kNominal.size(); ++i) {
    const auto inside = std::count_if(
        z.begin(), z.end(), [&](double v) { return 100 * std::erf(std::abs(v) / std::sqrt(2.0)) <= kNominal[i]; });
    if (!z.empty()) c.observed[i] = 100 * static_cast<double>(inside) / static_cast<double>(z.size());
  }
  return c;
}

std::string reliability_svg(const std::vector<ReliabilityCurve>& curves) {
  std::string out = fmt::format(
      "<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 {0:.0f} {1:.0f}\" width=\"{0:.0f}\" height=\"{1:.0f}\" "
      "font-family=\"sans-serif\" font-size=\"15\">\n<title>Coverage of the intervals on molecules held out</title>\n"
      "<rect width=\"100%\" height=\"100%\" fill=\"#fff\"/>\n",
      kWidth, kHeight);
  out += text(kLeft, 34, "start", "Coverage of the intervals on molecules held out", " font-size=\"17\"");
  if (curves.empty() || curves.front().rows == 0) return out + "</svg>\n";
  out += band(curves.front().rows) + axes();
  for (std::size_t i = 0; i < curves.size(); ++i) out += curve(curves[i], kStyles[i % std::size(kStyles)]);
  return out + legend(curves) + "</svg>\n";
}

}  // namespace halostep
