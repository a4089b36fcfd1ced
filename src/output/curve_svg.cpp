#include "output/curve_svg.h"

#include <algorithm>
#include <cmath>
#include <optional>
#include <stdexcept>
#include <string_view>
#include <vector>

#include "colour/notation.h"
#include "output/curve_panel.h"
#include "output/curve_style.h"
#include "output/plot_axes.h"
#include "output/svg.h"
#include "support/format.h"
#include "support/utf8.h"

namespace tincture {
namespace {

using namespace curve_style;

constexpr double page_width = 880;
constexpr double page_height = 712;
constexpr double plot_left = 76;  // of the plots
constexpr double plot_right = 848;
constexpr double margin = 28;
constexpr Box error_frame{plot_left, 168, plot_right - plot_left, 230};
constexpr Box difference_frame{plot_left, 446, plot_right - plot_left, 180};

// Where a palette is used as given, nothing is proposed.
bool has_proposal(const Study& study) {
    return study.proposal.count > 0;
}

std::string range_words(const Proposal& proposal) {
    if (proposal.low == proposal.high) return "only " + std::to_string(proposal.low);
    const char* joined = proposal.high == proposal.low + 1 ? " or " : " to ";
    return std::to_string(proposal.low) + joined + std::to_string(proposal.high);
}

std::string choice_words(const Study& study) {
    if (!study.count_was_given) {
        return colours(study.count) + (study.count == 1 ? " is" : " are") + " proposed; " +
               range_words(study.proposal) + " can be defended.";
    }
    const std::string given =
        colours(study.count) + (study.count == 1 ? " was" : " were") + " given";
    if (!has_proposal(study)) return given + '.';
    return given + "; the proposal is " + std::to_string(study.proposal.count) + "; " +
           range_words(study.proposal) + " can be defended.";
}

std::string figures_words(const Study& study) {
    const CurvePoint& point = curve_at(study, study.count);
    return "At " + colours(study.count) + ": root mean squared error " +
           fixed(std::sqrt(point.mse), 2) + "; CIEDE2000 " + fixed(point.mean_de00, 2) +
           " on average, at most " + fixed(point.p95_de00, 2) + " for 95\u2009% of the pixels.";
}

const Vote* vote_of(const Study& study, std::string_view criterion) {
    for (const Vote& vote : study.proposal.votes) {
        const bool on_curve = vote.count && std::any_of(study.curve.begin(), study.curve.end(),
                                                        [&](const CurvePoint& point) {
                                                            return point.count == *vote.count;
                                                        });
        if (vote.criterion == criterion && on_curve) return &vote;
    }
    return nullptr;
}

class CurveDrawing {
  public:
    explicit CurveDrawing(const Study& study)
        : study_(study),
          counts_(counts_of(study)),
          axis_(counts_, plot_left, plot_right),
          svg_(page_width, page_height, "tincture-curve",
               "Error curve of " + legible(study.picture.file),
               choice_words(study) + ' ' + figures_words(study) + ' ' + study.proposal.sentence) {
        if (!has_proposal(study)) return;
        const int last = axis_.last();
        low_ = axis_.position(std::clamp(study.proposal.low, counts_.front(), last) - 0.45);
        high_ = axis_.position(std::clamp(study.proposal.high, counts_.front(), last) + 0.45);
        low_ = std::max(low_, plot_left);
        high_ = std::min(high_, plot_right);
    }

    std::string draw() {
        head();
        choice_name();
        std::vector<std::string> left_over;
        for (const Panel& panel : {error_panel(), difference_panel()}) {
            const auto names = draw_panel(svg_, panel, axis_, counts_);
            left_over.insert(left_over.end(), names.begin(), names.end());
        }
        foot(left_over);
        return std::move(svg_).finish();
    }

  private:
    static std::vector<int> counts_of(const Study& study) {
        std::vector<int> counts;
        for (const CurvePoint& point : study.curve) counts.push_back(point.count);
        if (counts.empty()) throw std::out_of_range("the study holds no curve");
        return counts;
    }

    template <typename Value>
    std::vector<double> values(const Value& value) const {
        std::vector<double> result;
        for (const CurvePoint& point : study_.curve) result.push_back(value(point));
        return result;
    }

    void head() {
        const double width = (page_width - 2 * margin) / wider_font;
        svg_.text({margin, 42}, shortened(legible(study_.picture.file), 20, Weight::medium, width),
                  {20, Weight::medium, ink, Anchor::start});
        svg_.text({margin, 64}, choice_words(study_),
                  {label_size, Weight::regular, ink, Anchor::start});
        svg_.text({margin, 82}, figures_words(study_),
                  {label_size, Weight::regular, quiet, Anchor::start});
        strip({margin, 96, page_width - 2 * margin, 10});
    }

    // The palette in use, each colour as wide as its share.
    void strip(const Box& box) {
        double covered = 0;
        double x = box.x;
        for (const Swatch& swatch : palette_at(study_, study_.count).swatches) {
            covered += swatch.share;
            const double end = box.x + std::round(box.width * std::min(covered, 1.0));
            if (end > x) svg_.box({x, box.y, end - x, box.height}, hex(swatch.srgb));
            x = std::max(x, end);
        }
        svg_.box({box.x + 0.5, box.y + 0.5, box.width - 1, box.height - 1}, "none", "#bebebe");
    }

    void choice_name() {
        const std::string name =
            (study_.count_was_given ? "given: " : "proposed: ") + std::to_string(study_.count);
        const double half = text_width(name, label_size, Weight::medium) * wider_font / 2;
        const double x =
            std::clamp(axis_.position(study_.count), plot_left + half, plot_right - half);
        svg_.text({x, error_frame.y - 6}, name,
                  {label_size, Weight::medium, accent, Anchor::middle});
    }

    [[nodiscard]] Box band_in(const Box& frame) const {
        return {low_, frame.y, high_ - low_, frame.height};
    }

    Panel error_panel() const {
        const auto root = [](double mse) { return std::sqrt(std::max(mse, 0.0)); };
        Panel panel{
            error_frame,  "Error: root mean squared difference in CIELAB (CIE 1976, log scale)",
            28,           0.05,
            {},           {},
            {},           {},
            study_.count, band_in(error_frame)};
        panel.lines = {
            {"all pixels", values([&](const CurvePoint& p) { return root(p.mse); }), true},
            {"evidence", values([&](const CurvePoint& p) { return root(p.evidence_mse); }), false}};
        const bool same =
            std::all_of(study_.curve.begin(), study_.curve.end(), [&](const CurvePoint& point) {
                const double mse = root(point.mse);
                const double evidence = root(point.evidence_mse);
                return std::abs(mse - evidence) <= 0.04 * mse || std::max(mse, evidence) < 0.05;
            });
        if (same) panel.lines.pop_back();
        if (const Vote* knee = vote_of(study_, "knee")) {
            const CurvePoint& point = curve_at(study_, *knee->count);
            panel.marks.push_back({MarkShape::diamond, *knee->count,
                                   root(same ? point.mse : point.evidence_mse),
                                   "knee: " + std::to_string(*knee->count)});
        }
        return panel;
    }

    Panel difference_panel() const {
        Panel panel{difference_frame,
                    "Difference from the original (CIEDE2000, log scale)",
                    12,
                    0.1,
                    {},
                    {},
                    study_.tolerance,
                    "tolerance " + tolerance_words(),
                    study_.count,
                    band_in(difference_frame)};
        panel.lines = {{"95\u2009% of the pixels",
                        values([](const CurvePoint& p) { return p.p95_de00; }), true},
                       {"average", values([](const CurvePoint& p) { return p.mean_de00; }), false}};
        const bool met = std::any_of(
            study_.curve.begin(), study_.curve.end(),
            [&](const CurvePoint& point) { return point.p95_de00 <= study_.tolerance; });
        if (const Vote* vote = vote_of(study_, "tolerance")) {
            panel.marks.push_back({MarkShape::triangle, *vote->count,
                                   curve_at(study_, *vote->count).p95_de00,
                                   "within tolerance: " + std::to_string(*vote->count)});
        } else if (!met) {
            panel.level_name += ", not met";
        }
        return panel;
    }

    [[nodiscard]] std::string tolerance_words() const {
        std::string text = fixed(study_.tolerance, 2);
        while (text.ends_with('0')) text.pop_back();
        if (text.ends_with('.')) text.pop_back();
        return text;
    }

    void foot(const std::vector<std::string>& left_over) {
        const double y = difference_frame.bottom();
        for (const AxisTick& tick : axis_.ticks(study_.count)) {
            svg_.line({{tick.position, y}, {tick.position, y + 4}}, {quiet, 1});
            const bool chosen = tick.words == std::to_string(study_.count);
            svg_.text({tick.position, y + 18}, tick.words,
                      {tick_size, chosen ? Weight::medium : Weight::regular,
                       chosen ? accent : quiet, Anchor::middle});
        }
        if (has_proposal(study_)) bracket(y + 26);
        std::string title =
            axis_.is_logarithmic() ? "Number of colours (log scale)" : "Number of colours";
        for (const std::string& name : left_over) title += "; " + name;
        svg_.text({(plot_left + plot_right) / 2, y + 70}, title,
                  {label_size, Weight::medium, ink, Anchor::middle});
    }

    void bracket(double y) {
        svg_.polyline(std::vector<Point>{{low_, y}, {low_, y + 5}, {high_, y + 5}, {high_, y}},
                      {quiet, 1});
        std::string words = range_words(study_.proposal) + " can be defended";
        if (study_.count_was_given && study_.count != study_.proposal.count) {
            words = "proposed: " + std::to_string(study_.proposal.count) + "; " + words;
            const double x = axis_.position(study_.proposal.count);
            svg_.dot({x, y + 5}, 3.5, "#ffffff", quiet);
        }
        const double half = text_width(words, label_size, Weight::regular) * wider_font / 2;
        const double x = std::clamp((low_ + high_) / 2, plot_left + half, plot_right - half);
        svg_.text({x, y + 22}, words, {label_size, Weight::regular, quiet, Anchor::middle});
    }

    const Study& study_;
    std::vector<int> counts_;
    CountAxis axis_;
    SvgWriter svg_;
    double low_ = 0;  // ends of the defensible range
    double high_ = 0;
};

}  // namespace

std::string curve_svg(const Study& study) {
    return CurveDrawing(study).draw();
}

}  // namespace tincture
