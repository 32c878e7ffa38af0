#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "isotally/report.hpp"

namespace isotally {
namespace {

constexpr double side = 320, margin = 60, gap = 90;

/// Axes of one square panel, 0 to 100 percent both ways.
std::string axes(double left, const std::string& title, const std::string& across, const std::string& up) {
    std::string out = fmt::format(
        "<g transform=\"translate({:g},{:g})\">\n<text x=\"{:g}\" y=\"-14\" text-anchor=\"middle\" "
        "font-weight=\"bold\">{}</text>\n<rect width=\"{:g}\" height=\"{:g}\" fill=\"none\" "
        "stroke=\"currentColor\"/>\n<path d=\"M0 {:g}L{:g} 0\" stroke=\"currentColor\" "
        "stroke-dasharray=\"4 4\" opacity=\"0.6\"/>\n",
        left, margin, side / 2, title, side, side, side, side);
    for (int tick = 0; tick <= 100; tick += 20) {
        const double at = side * tick / 100;
        out += fmt::format(
            "<text x=\"{:g}\" y=\"{:g}\" text-anchor=\"middle\">{}</text>\n<text x=\"-8\" y=\"{:g}\" "
            "text-anchor=\"end\" dominant-baseline=\"middle\">{}</text>\n",
            at, side + 18, tick, side - at, tick);
    }
    return out + fmt::format("<text x=\"{:g}\" y=\"{:g}\" text-anchor=\"middle\">{}</text>\n<text "
                             "transform=\"translate(-40,{:g}) "
                             "rotate(-90)\" text-anchor=\"middle\">{}</text>\n",
                             side / 2, side + 40, across, side / 2, up);
}

double x_of(double percent) {
    return side * percent / 100;
}

double y_of(double percent) {
    return side - x_of(percent);
}

/// Interval as a line, circle where it holds the observed share, cross where it does not.
std::string point(const CheckedIsomer& isomer) {
    const double x = x_of(isomer.observed_percent), y = y_of(isomer.predicted_percent);
    std::string out =
        fmt::format("<path d=\"M{:.1f} {:.1f}V{:.1f}\" stroke=\"currentColor\" opacity=\"0.25\"/>", x,
                    y_of(isomer.low), y_of(isomer.high));
    if (isomer.observed_percent >= isomer.low && isomer.observed_percent <= isomer.high)
        out += fmt::format("<circle cx=\"{:.1f}\" cy=\"{:.1f}\" r=\"3\" fill=\"#0072b2\"/>\n", x, y);
    else
        out +=
            fmt::format("<path d=\"M{:.1f} {:.1f}l7 7m0 -7l-7 7\" stroke=\"#d55e00\" stroke-width=\"2\"/>\n",
                        x - 3.5, y - 3.5);
    return out;
}

/// Share of observed values inside the central interval of each width, were the interval rescaled about the
/// predicted share: z = |observed - predicted| in units of the half width that claims 90 %.
std::string coverage_curve(const std::vector<CheckedIsomer>& isomers) {
    std::vector<double> reach;  // claimed level at which the interval just holds the value
    for (const auto& isomer : isomers) {
        const double apart = isomer.observed_percent - isomer.predicted_percent;
        const double half =
            apart < 0 ? isomer.predicted_percent - isomer.low : isomer.high - isomer.predicted_percent;
        const double z = half > 0 ? std::abs(apart) / half * 1.6449 : (apart == 0 ? 0 : 9);
        reach.push_back(std::erf(z / std::sqrt(2.0)));
    }
    std::sort(reach.begin(), reach.end());
    std::string path;
    for (int level = 0; level <= 100; level += 2) {
        const auto inside = std::upper_bound(reach.begin(), reach.end(), level / 100.0) - reach.begin();
        const double share =
            reach.empty() ? 0 : 100.0 * static_cast<double>(inside) / static_cast<double>(reach.size());
        path += fmt::format("{}{:.1f} {:.1f}", level == 0 ? "M" : "L", x_of(level), y_of(share));
    }
    return fmt::format("<path d=\"{}\" fill=\"none\" stroke=\"#0072b2\" stroke-width=\"2.5\"/>\n", path);
}

}  // namespace

std::string check_svg(const std::vector<CheckSet>& sets) {
    std::vector<CheckedIsomer> isomers;
    for (const auto& set : sets)
        if (set.name.ends_with("-mono") || set.name.ends_with("-poly"))
            for (const auto& record : set.records)
                for (const auto& isomer : record.isomers)
                    if (record.complete && (isomer.observed_percent > 1 || isomer.predicted_percent > 1))
                        isomers.push_back(isomer);
    const double width = 2 * (margin + side) + gap, height = margin + side + 60;
    const auto held = std::count_if(isomers.begin(), isomers.end(), [](const CheckedIsomer& i) {
        return i.observed_percent >= i.low && i.observed_percent <= i.high;
    });
    const auto text = fmt::format(
        "{} isomer shares, each predicted without the measurements on its compound; the 90 % interval "
        "holds {} of them. Left: predicted against observed percent, circle where the interval holds, "
        "cross where it does not. Right: how often intervals hold against how often they claim to.",
        isomers.size(), held);
    std::string out = fmt::format(
        "<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 {0:g} {1:g}\" width=\"{0:g}\" "
        "height=\"{1:g}\" role=\"img\" font-family=\"sans-serif\" font-size=\"12\" "
        "fill=\"currentColor\">\n<title>Predictions against literature</title>\n<desc>{2}</desc>\n",
        width, height, text);
    out += axes(margin, "Shares", "observed, %", "predicted, %");
    for (const auto& isomer : isomers)
        out += point(isomer);
    out += "</g>\n" + axes(margin + side + gap, "Calibration", "claimed, %", "held, %") +
           coverage_curve(isomers);
    return out + "</g>\n</svg>\n";
}

}  // namespace isotally
