#include "commands/summary.h"

#include <algorithm>
#include <cmath>
#include <vector>

#include "choose/criteria.h"
#include "colour/notation.h"
#include "support/format.h"
#include "support/maths.h"
#include "support/text.h"

namespace tincture {
namespace {

constexpr std::size_t longest_list = 24;

std::string padded(const std::string& text, std::size_t width) {
    return text.size() < width ? std::string(width - text.size(), ' ') + text : text;
}

// 1234567 as 1,234,567.
std::string grouped(std::uint64_t number) {
    std::string text = std::to_string(number);
    for (std::size_t at = text.size(); at > 3; at -= 3) text.insert(at - 3, ",");
    return text;
}

std::string styled(const std::string& text, const char* code, const Terminal& terminal) {
    return terminal.colour ? std::string("\x1b[") + code + "m" + text + "\x1b[0m" : text;
}

// Breaks text at spaces into lines that begin with two spaces.
std::string wrapped(const std::string& text, int width) {
    std::string out = "  ";
    std::size_t column = 2;
    for (std::size_t at = 0; at < text.size();) {
        const std::size_t end = std::min(text.find(' ', at), text.size());
        const std::size_t length = end - at;
        if (column > 2 && column + 1 + length > static_cast<std::size_t>(width)) {
            out += "\n  ";
            column = 2;
        } else if (column > 2) {
            out += ' ';
            ++column;
        }
        out.append(text, at, length);
        column += length;
        at = end + 1;
    }
    return out + "\n";
}

std::string picture_line(const Study& study, const Terminal& terminal) {
    const PictureFacts& facts = study.picture;
    const char* model = facts.channels == 1 ? "grey" : facts.channels == 3 ? "RGB" : "CMYK";
    std::string line = styled(shown(facts.file), "1", terminal) + "\n";
    std::string rest = std::to_string(facts.width) + " x " + std::to_string(facts.height) +
                       " pixels, " + std::to_string(facts.bits) + "-bit " + model + ", ";
    rest += facts.profile ? "profile " + shown(*facts.profile) : "no profile: taken as sRGB";
    if (facts.resolution) rest += ", " + fixed(facts.resolution->x_dpi, 0) + " dpi";
    rest += ", " + grouped(facts.distinct_colours) +
            (facts.colour_cell_de
                 ? " cells of " + fixed(*facts.colour_cell_de, 2) + " dE of different colours"
             : facts.distinct_colours == 1 ? " colour"
                                           : " different colours");
    return line + wrapped(rest, terminal.width);
}

std::string proposal_lines(const Study& study, const Terminal& terminal) {
    const Proposal& proposal = study.proposal;
    const std::string head = study.count_was_given
                                 ? "Using " + std::to_string(study.count) + ", as asked; proposed: "
                                 : "Proposed: ";
    std::string text = wrapped(head + proposal.sentence, terminal.width);
    const std::string range =
        proposal.low == proposal.high
            ? std::to_string(proposal.low)
            : std::to_string(proposal.low) + " to " + std::to_string(proposal.high);
    return text + wrapped("Defensible: " + range + ". Confidence " + fixed(proposal.confidence, 1) +
                              ", a first guess.",
                          terminal.width);
}

std::string chip(Rgb8 colour, const Terminal& terminal) {
    if (!terminal.colour) return "";
    return "\x1b[48;2;" + std::to_string(colour.r) + ";" + std::to_string(colour.g) + ";" +
           std::to_string(colour.b) + "m      \x1b[0m  ";
}

std::string swatch_lines(const Study& study, const Terminal& terminal) {
    const Palette& palette = palette_at(study, study.count);
    const std::string indent = terminal.colour ? "          " : "  ";
    std::string text =
        styled(indent + "  share  sRGB          L*      a*      b*  name", "2", terminal) + "\n";
    std::size_t listed = 0;
    for (const Swatch& swatch : palette.swatches) {
        if (++listed > longest_list) {
            text += "  and " + std::to_string(palette.swatches.size() - longest_list) +
                    " more, in swatches.csv\n";
            break;
        }
        text += "  " + chip(swatch.srgb, terminal) + padded(fixed(100 * swatch.share, 1), 5) +
                " %  " + hex(swatch.srgb) + padded(fixed(swatch.lab.L, 1), 8) +
                padded(fixed(swatch.lab.a, 1), 8) + padded(fixed(swatch.lab.b, 1), 8) + "  " +
                swatch.name + (swatch.kept ? " (kept)" : "") + "\n";
    }
    return text;
}

// A bar of eighths of a column.
std::string bar(double part, std::size_t width, const Terminal& terminal) {
    const auto eighths =
        static_cast<std::size_t>(std::lround(part * static_cast<double>(width) * 8));
    if (!terminal.unicode) return std::string(eighths / 8, '#');
    static constexpr const char* partial[] = {"", "▏", "▎", "▍", "▌", "▋", "▊", "▉"};
    std::string text;
    for (std::size_t i = 0; i < eighths / 8; ++i) text += "█";
    return text + partial[eighths % 8];
}

// What is remarkable about a count.
std::string marks(const Study& study, int count) {
    std::string text;
    const auto add = [&](const std::string& mark) { text += (text.empty() ? "" : ", ") + mark; };
    if (count == study.count) add(study.count_was_given ? "used" : "proposed");
    if (count == study.proposal.count && study.count_was_given && count != study.count)
        add("proposed");
    for (const Vote& vote : study.proposal.votes) {
        if (vote.count == count) add(vote.criterion);
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

std::string curve_lines(const Study& study, const Terminal& terminal) {
    const std::vector<const CurvePoint*> points = listed_points(study);
    // Bars show the logarithm, as the knee is read from it; half a squared dE is the floor there.
    const auto height = [](const CurvePoint& point) { return natural_log(point.mse + 0.5); };
    double low = height(*points.front());
    double high = low;
    for (const CurvePoint* point : points) {
        low = std::min(low, height(*point));
        high = std::max(high, height(*point));
    }
    std::string text =
        styled("  count   RMS dE76   CIEDE2000 mean   95 %   worst", "2", terminal) + "\n";
    for (const CurvePoint* point : points) {
        const bool chosen = point->count == study.count;
        const double part = high > low ? 0.06 + 0.94 * (height(*point) - low) / (high - low) : 1;
        std::string line =
            "  " + padded(std::to_string(point->count), 5) +
            padded(fixed(std::sqrt(point->mse), 2), 11) + padded(fixed(point->mean_de00, 2), 17) +
            padded(fixed(point->p95_de00, 1), 7) + padded(fixed(point->max_de00, 1), 8) + "  ";
        line += bar(part, 16, terminal);
        const std::string mark = marks(study, point->count);
        if (!mark.empty()) line += (terminal.unicode ? "  ◂ " : "  < ") + mark;
        text += (chosen ? styled(line, "1", terminal) : line) + "\n";
    }
    return text;
}

}  // namespace

std::string summary(const Study& study, const Terminal& terminal, const std::string& folder) {
    return picture_line(study, terminal) + "\n" + proposal_lines(study, terminal) + "\n" +
           swatch_lines(study, terminal) + "\n" + curve_lines(study, terminal) + "\n" +
           wrapped("Files in " + shown(folder) +
                       ": reduced.png, swatches.csv, .svg, .png and .tokens.json, curve.csv and "
                       ".svg, study.json.",
                   terminal.width) +
           wrapped("A screen is no proof: judge colours on a printed one, under D50.",
                   terminal.width);
}

}  // namespace tincture
