#include "commands/step_table.h"

#include <algorithm>
#include <vector>

#include "colour/notation.h"
#include "commands/styles.h"
#include "commands/text_layout.h"
#include "support/format.h"

namespace tincture {
namespace {

// Steps that are shown: one above the count that is used, and so many below.
constexpr int steps_below = 3;
constexpr std::size_t share_width = 8;
constexpr std::size_t mean_width = 7;

std::vector<const CurvePoint*> steps_of(const Study& study) {
    std::vector<const CurvePoint*> steps;
    for (const CurvePoint& point : study.curve) {
        const bool near = point.count <= study.count && point.count >= study.count - steps_below;
        if (near && point.loss) steps.push_back(&point);
    }
    std::reverse(steps.begin(), steps.end());
    return steps;
}

struct Step {
    const CurvePoint& point;
    const Swatch& lost;
    const Swatch& into;

    Step(const Study& study, const CurvePoint& at)
        : point(at),
          lost(palette_at(study, at.count + 1).swatches.at(at.loss->colour)),
          into(palette_at(study, at.count).swatches.at(at.loss->into)) {}

    [[nodiscard]] std::string share() const { return fixed(100 * point.loss->share, 1) + " %"; }
    [[nodiscard]] std::string goes(bool with_hex) const {
        return lost.name + (with_hex ? " " + hex(lost.srgb) : "");
    }
    // What its pixels become, and how many of them where it is not nearly all.
    [[nodiscard]] std::string becomes(bool with_hex) const {
        const double part = point.loss->into_share;
        std::string text = "into " + into.name + (with_hex ? " " + hex(into.srgb) : "");
        if (point.loss->pixels > 0 && part < 0.995) text += " (" + fixed(100 * part, 0) + " %)";
        return text;
    }
};

std::size_t widest(const std::vector<Step>& steps, bool with_hex) {
    std::size_t width = 0;
    for (const Step& step : steps) {
        width =
            std::max({width, columns_of(step.goes(with_hex)), columns_of(step.becomes(with_hex))});
    }
    return width;
}

std::string arrow(const Terminal& terminal) {
    return terminal.unicode ? " → " : " > ";
}

struct Columns {
    std::size_t numbers;  // digits of a count
    std::size_t names;
    bool with_hex;
};

// One line for the colour that goes and one for what it becomes, with figures in columns.
std::string table_row(const Step& step, const Columns& columns, const Terminal& terminal) {
    const CountLoss& loss = *step.point.loss;
    const std::string counts = flush_right(std::to_string(step.point.count + 1), columns.numbers) +
                               arrow(terminal) +
                               flush_left(std::to_string(step.point.count), columns.numbers) + "  ";
    const auto figures = [](double mean, double worst) {
        return flush_right(fixed(mean, 1), mean_width) + flush_right(fixed(worst, 1), mean_width);
    };
    return std::string(margin, ' ') + counts + chips(step.lost.srgb, step.into.srgb, terminal) +
           flush_left(step.goes(columns.with_hex), columns.names) +
           flush_right(step.share(), share_width) +
           faint(figures(loss.mean_de00_before, loss.max_de00_before), terminal) + "\n" +
           std::string(margin + columns_of(counts) + chip_width(terminal), ' ') +
           flush_left(step.becomes(columns.with_hex), columns.names) +
           std::string(share_width, ' ') + figures(loss.mean_de00, loss.max_de00) + "\n";
}

std::string sentence(const Step& step, const Terminal& terminal) {
    const CountLoss& loss = *step.point.loss;
    return paragraph(
        std::to_string(step.point.count + 1) + arrow(terminal) + std::to_string(step.point.count) +
            ": " + step.lost.name + " (" + step.share() + ") goes " + step.becomes(false) + ", " +
            fixed(loss.mean_de00, 1) + " on average, " + fixed(loss.max_de00, 1) + " at worst",
        terminal);
}

}  // namespace

std::string step_lines(const Study& study, const Terminal& terminal) {
    std::vector<Step> steps;
    for (const CurvePoint* point : steps_of(study)) steps.emplace_back(study, *point);
    if (steps.empty()) return "";
    const std::size_t numbers = std::to_string(steps.front().point.count + 1).size();
    const std::size_t front = margin + 2 * numbers + 5 + chip_width(terminal);
    const auto fits = [&](bool with_hex) {
        return front + widest(steps, with_hex) + share_width + 2 * mean_width <= width_of(terminal);
    };
    std::string text = remark(
        "What one colour fewer costs: the colour that goes, and the one that most of its pixels "
        "get, with the CIEDE2000 of these pixels" +
            std::string(fits(false) ? " before and after." : "."),
        terminal);
    if (!fits(false)) {
        for (const Step& step : steps) text += sentence(step, terminal);
        return text + "\n";
    }
    const Columns columns = {numbers, widest(steps, fits(true)), fits(true)};
    text +=
        faint(std::string(front + columns.names, ' ') + "   share   mean  worst", terminal) + "\n";
    for (const Step& step : steps) text += table_row(step, columns, terminal);
    return text + "\n";
}

}  // namespace tincture
