#include "commands/summary.h"

#include <algorithm>
#include <cmath>
#include <vector>

#include "choose/criteria.h"
#include "colour/notation.h"
#include "commands/step_table.h"
#include "commands/styles.h"
#include "commands/text_layout.h"
#include "support/format.h"
#include "support/maths.h"
#include "support/text.h"

namespace tincture {
namespace {

constexpr std::size_t longest_list = 24;
constexpr std::size_t mark_sign = 3;  // columns of what leads from a bar to its mark

std::string picture_lines(const Study& study, const Terminal& terminal) {
    const PictureFacts& facts = study.picture;
    const char* model = facts.channels == 1 ? "grey" : facts.channels == 3 ? "RGB" : "CMYK";
    std::string text = std::to_string(facts.width) + " x " + std::to_string(facts.height) +
                       " pixels, " + std::to_string(facts.bits) + "-bit " + model + ", ";
    text += facts.profile ? "profile " + shown(*facts.profile) : "no profile: taken as sRGB";
    if (facts.resolution) text += ", " + fixed(facts.resolution->x_dpi, 0) + " dpi";
    text += ", " + grouped(facts.distinct_colours) +
            (facts.colour_cell_de
                 ? " cells of " + fixed(*facts.colour_cell_de, 2) + " dE of different colours"
             : facts.distinct_colours == 1 ? " colour"
                                           : " different colours");
    return bold(shown(facts.file), terminal) + "\n" + paragraph(text, terminal);
}

// Why the count is another than the proposed one; empty if it is not.
std::string about_count(const Study& study, const std::optional<int>& asked) {
    if (!asked) return "";
    const std::string used = colours(study.count);
    if (study.count == *asked) return used + ", as asked. ";
    return colours(*asked) + " were asked for, but the picture has only " +
           std::to_string(study.count) + ": " + used + (study.count == 1 ? " is" : " are") +
           " used. ";
}

std::string proposal_lines(const Study& study, const std::optional<int>& asked,
                           const Terminal& terminal) {
    const Proposal& proposal = study.proposal;
    const std::string before = about_count(study, asked);
    std::string text = paragraph(before + "The proposal is " + proposal.sentence, terminal);
    const std::string count = colours(asked ? study.count : proposal.count);
    // Where a line ends within it, it stays plain.
    const std::size_t at = text.find(count);
    if (at != std::string::npos) text.replace(at, count.size(), bold(count, terminal));

    const std::string range =
        proposal.low == proposal.high
            ? "this one alone"
            : std::to_string(proposal.low) + " to " + std::to_string(proposal.high);
    return text + paragraph("Counts that can be defended: " + range +
                                ". Confidence: " + fixed(proposal.confidence, 1) +
                                " of 1, as often as such evidence was right on drawn pictures.",
                            terminal);
}

std::string accent_words(const Study& study, const Terminal& terminal) {
    if (!study.accents) return "";
    const std::size_t n = study.accents->colours.size();
    const std::string subject =
        n == 1 ? "One small colour that stands apart was given more weight"
               : std::to_string(n) + " small colours that stand apart were given more weight";
    return paragraph(subject + " than by area: the mean squared error over the picture is " +
                         fixed(curve_at(study, study.count).mse, 1) + " instead of " +
                         fixed(study.accents->mse_by_area, 1) +
                         " (--emphasis area leaves them be).",
                     terminal);
}

std::string swatch_line(const Swatch& swatch, const Terminal& terminal) {
    std::string figures =
        flush_right(fixed(100 * swatch.share, 1), 5) + " %  " + hex(swatch.srgb) + "  ";
    if (is_roomy(terminal)) {
        for (const double value : {swatch.lab.L, swatch.lab.a, swatch.lab.b}) {
            figures += flush_right(fixed(value, 1), 6) + "  ";
        }
    }
    std::string name = swatch.name;
    if (swatch.kept) name += " (kept)";
    if (swatch.hex_de00) name += " (sRGB is off by " + fixed(*swatch.hex_de00, 1) + ")";
    const std::size_t used = margin + chip_width(terminal);
    // The chip has no width of its own in `wrapped`: its escape sequences are put in front.
    return std::string(margin, ' ') + chip(swatch.srgb, terminal) +
           wrapped(figures, name, width_of(terminal) - used, used + columns_of(figures));
}

std::string swatch_lines(const Study& study, const Terminal& terminal) {
    const Palette& palette = palette_at(study, study.count);
    std::string head(margin + chip_width(terminal), ' ');
    head += "  share  sRGB     ";
    if (is_roomy(terminal)) head += "    L*      a*      b*  ";
    std::string text = faint(head + "name", terminal) + "\n";
    const std::size_t listed = std::min(palette.swatches.size(), longest_list);
    for (std::size_t i = 0; i < listed; ++i) text += swatch_line(palette.swatches[i], terminal);
    if (listed < palette.swatches.size()) {
        text += paragraph(
            "and " + std::to_string(palette.swatches.size() - listed) + " more, in swatches.csv",
            terminal);
    }
    return text;
}

// What is remarkable about a count.
std::string marks(const Study& study, int count) {
    std::string text;
    const auto add = [&](const std::string& mark) { text += (text.empty() ? "" : ", ") + mark; };
    if (count == study.count && study.count_was_given) add("used");
    if (count == study.proposal.count) add("proposed");
    std::vector<std::string> names;
    for (const Vote& vote : study.proposal.votes) {
        if (vote.count == count) names.push_back(vote.criterion);
    }
    constexpr std::size_t most_names = 2;  // more leave no room for the bar
    if (names.size() > most_names) {
        add(std::to_string(names.size()) + " votes of " +
            std::to_string(study.proposal.votes.size()));
    } else {
        for (const std::string& name : names) add(name);
    }
    return text;
}

// The points to list: all of the range, or where that is long the ends, the choice and steps
// between.
std::vector<const CurvePoint*> listed_points(const Study& study) {
    std::vector<const CurvePoint*> all;
    for (const CurvePoint& point : study.curve) {
        const bool in_range = point.count >= study.at_least && point.count <= study.at_most;
        if (in_range || point.count == study.count || point.count == study.proposal.count) {
            all.push_back(&point);
        }
    }
    if (all.size() <= longest_list) return all;
    std::vector<const CurvePoint*> some;
    for (std::size_t i = 0; i < all.size(); ++i) {
        const bool stepped = i % ((all.size() + longest_list - 1) / longest_list) == 0;
        if (stepped || i + 1 == all.size() || !marks(study, all[i]->count).empty())
            some.push_back(all[i]);
    }
    return some;
}

struct CurveRow {
    bool chosen = false;
    std::string figures;
    double part = 0;  // length of the bar, 0 to 1
    std::string mark;
};

std::vector<CurveRow> curve_rows(const Study& study, const Terminal& terminal) {
    const std::vector<const CurvePoint*> points = listed_points(study);
    // Bars show the logarithm, as the knee is read from it; half a squared dE is the floor there.
    const auto height = [](const CurvePoint* point) { return natural_log(point->mse + 0.5); };
    const auto lower = [&](const CurvePoint* one, const CurvePoint* two) {
        return height(one) < height(two);
    };
    const auto [least, most] = std::minmax_element(points.begin(), points.end(), lower);
    const double low = height(*least);
    const double high = height(*most);
    std::vector<CurveRow> rows;
    for (const CurvePoint* point : points) {
        CurveRow row;
        row.chosen = point->count == study.count;
        row.figures = std::string(margin, ' ') + flush_right(std::to_string(point->count), 7) +
                      flush_right(fixed(point->mean_de00, 2), 8) +
                      flush_right(fixed(point->p95_de00, 1), 8) +
                      flush_right(fixed(point->max_de00, 1), 8);
        if (is_roomy(terminal)) {
            row.figures += flush_right(fixed(std::sqrt(point->mse), 2), 11) + "   ";
        }
        row.part = high > low ? 0.06 + 0.94 * (height(point) - low) / (high - low) : 1;
        row.mark = marks(study, point->count);
        rows.push_back(std::move(row));
    }
    return rows;
}

// The longest bars that leave room for the marks behind them.
std::size_t bar_width(const std::vector<CurveRow>& rows, const Terminal& terminal) {
    constexpr double longest = 30;
    constexpr double shortest = 8;
    if (!is_roomy(terminal)) return 0;
    double width = longest;
    for (const CurveRow& row : rows) {
        const auto used =
            static_cast<double>(columns_of(row.figures) + columns_of(row.mark) + mark_sign);
        const double room = (static_cast<double>(terminal.width) - used) / row.part;
        // Where even the shortest bar leaves no room, the mark goes below.
        if (room >= shortest) width = std::min(width, room);
    }
    return static_cast<std::size_t>(width);
}

// A bar of eighths of a column.
std::string bar(double part, std::size_t width, const Terminal& terminal) {
    const auto eighths =
        static_cast<std::size_t>(std::lround(part * static_cast<double>(width) * 8));
    if (!terminal.unicode) return std::string((eighths + 7) / 8, '#');
    static constexpr const char* partial[] = {"", "▏", "▎", "▍", "▌", "▋", "▊", "▉"};
    std::string text;
    for (std::size_t i = 0; i < eighths / 8; ++i) text += "█";
    return text + partial[eighths % 8];
}

std::string curve_line(const CurveRow& row, std::size_t width, const Terminal& terminal) {
    const auto styled_row = [&](const std::string& text) {
        return row.chosen ? bold(text, terminal) : text;
    };
    const std::string blocks = bar(row.part, width, terminal);
    const std::string line =
        styled_row(row.figures) + (row.chosen ? bold(blocks, terminal) : faint(blocks, terminal));
    if (row.mark.empty()) return line + "\n";
    const std::size_t used = columns_of(row.figures) + columns_of(blocks);
    if (used + mark_sign + columns_of(row.mark) <= width_of(terminal)) {
        return line + styled_row((terminal.unicode ? " ◂ " : " < ") + row.mark) + "\n";
    }
    std::string below = wrapped(std::string(margin + 6, ' ') + (terminal.unicode ? "▴ " : "^ "),
                                row.mark, width_of(terminal), margin + 8);
    below.pop_back();
    return line + "\n" + styled_row(below) + "\n";
}

std::string curve_lines(const Study& study, const Terminal& terminal) {
    const std::vector<CurveRow> rows = curve_rows(study, terminal);
    const std::size_t width = bar_width(rows, terminal);
    // That 1 is about the least difference to be seen is common practice.
    std::string text = remark(
        "The colour difference that each count leaves, in CIEDE2000 (about 1 can just be "
        "seen): on average, for 95 % of the pixels at most, and at the worst pixel." +
            std::string(width > 0 ? " The bars show the RMS error, logarithmic." : ""),
        terminal);
    std::string head = std::string(margin, ' ') + "colours    mean    95 %   worst";
    if (is_roomy(terminal)) head += "   RMS dE76";
    text += faint(head, terminal) + "\n";
    for (const CurveRow& row : rows) text += curve_line(row, width, terminal);
    return text;
}

std::string file_lines(const Study& study, const Terminal& terminal, const std::string& folder) {
    std::string text = paragraph("In the folder " + shown(folder) + ":", terminal);
    const auto add = [&](const char* name, const std::string& what) {
        constexpr std::size_t column = margin + 14;
        text += wrapped(flush_left(std::string(margin, ' ') + name, column), what,
                        width_of(terminal), column);
    };
    add("reduced.png", "the picture in " + colours(study.count));
    add("swatches.svg", "its palette, also as .png, .csv and .tokens.json");
    add("curve.svg", "what each count loses, also as .csv");
    add("study.json", "everything that was measured");
    return text +
           remark("A screen is no proof: judge colours on a printed one, under D50.", terminal);
}

}  // namespace

std::string summary(const Study& study, const std::optional<int>& asked, const Terminal& terminal,
                    const std::string& folder) {
    return picture_lines(study, terminal) + "\n" + proposal_lines(study, asked, terminal) + "\n" +
           swatch_lines(study, terminal) + accent_words(study, terminal) + "\n" +
           curve_lines(study, terminal) + "\n" + step_lines(study, terminal) +
           file_lines(study, terminal, folder);
}

}  // namespace tincture
