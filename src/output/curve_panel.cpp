#include "output/curve_panel.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <cstddef>

#include "output/curve_style.h"
#include "output/place_labels.h"

namespace tincture {
namespace {

using namespace curve_style;

constexpr double mark_size = 7;
constexpr double label_height = 16;

struct Words {
    std::string text;
    std::string_view colour;
    Weight weight;
};

class PanelDrawing {
  public:
    PanelDrawing(SvgWriter& svg, const Panel& panel, const CountAxis& axis,
                 const std::vector<int>& counts)
        : svg_(svg),
          panel_(panel),
          axis_(axis),
          counts_(counts),
          values_(value_axis(panel)),
          choice_x_(axis.position(panel.choice)) {
        for (const PanelLine& line : panel_.lines) {
            std::vector<Point> points;
            for (std::size_t i = 0; i < counts_.size(); ++i) {
                points.push_back({axis_.position(counts_[i]), values_.position(line.values[i])});
            }
            const bool hidden = !points_.empty() && same(points_.front(), points);
            names_.push_back(line.name);
            if (hidden) names_.front() += " and " + line.name;
            if (!hidden) points_.push_back(std::move(points));
        }
    }

    std::vector<std::string> draw() {
        ground();
        if (panel_.level) level();
        upright({choice_x_, panel_.frame.y}, {choice_x_, panel_.frame.bottom()});
        for (std::size_t i = points_.size(); i > 0; --i) curve(points_[i - 1], panel_.lines[i - 1]);
        for (const std::vector<Point>& points : points_) chosen_point(points);
        for (const PanelMark& mark : panel_.marks) draw_mark(mark);
        request_names();
        return draw_names();
    }

  private:
    static bool same(const std::vector<Point>& one, const std::vector<Point>& other) {
        return std::equal(one.begin(), one.end(), other.begin(),
                          [](Point a, Point b) { return a.y == b.y; });
    }

    static LogAxis value_axis(const Panel& panel) {
        std::vector<double> values;
        for (const PanelLine& line : panel.lines) {
            values.insert(values.end(), line.values.begin(), line.values.end());
        }
        if (panel.level) {
            constexpr double room_below = 1.5;  // for its name
            values.push_back(std::max(*panel.level / room_below, panel.floor));
            values.push_back(std::max(*panel.level * room_below, panel.floor));
        }
        return {values, panel.floor, panel.frame.y, panel.frame.bottom()};
    }

    void ground() {
        const Box& frame = panel_.frame;
        svg_.text({frame.x - 48, frame.y - panel_.title_height}, panel_.title,
                  {label_size, Weight::medium, ink, Anchor::start});
        if (panel_.band.width > 0) svg_.box(panel_.band, band_grey);
        for (const AxisTick& tick : values_.ticks()) {
            if (tick.position < frame.bottom()) {
                svg_.line({{frame.x, tick.position}, {frame.right(), tick.position}},
                          {grid_grey, 1});
            }
            svg_.text({frame.x - 9, tick.position + 4}, tick.words,
                      {tick_size, Weight::regular, quiet, Anchor::end});
        }
        svg_.line({{frame.x, frame.bottom()}, {frame.right(), frame.bottom()}}, {quiet, 1});
        svg_.line({{frame.x, frame.y}, {frame.x, frame.bottom()}}, {quiet, 1});
        if (values_.is_broken()) cut({frame.x, values_.break_position()}, {6, 2.5}, {0, 3});
        if (axis_.break_position())
            cut({*axis_.break_position(), frame.bottom()}, {2.5, 6}, {3, 0});
    }

    // Two slanted strokes across an axis: it is not continued to scale.
    void cut(Point at, Point slant, Point apart) {
        svg_.box({at.x - 3, at.y - 3, 6, 6}, "#ffffff");
        for (const double side : {-1.0, 1.0}) {
            const Point middle{at.x + side * apart.x, at.y + side * apart.y};
            svg_.line({{middle.x - slant.x, middle.y + slant.y},
                       {middle.x + slant.x, middle.y - slant.y}},
                      {quiet, 1});
        }
    }

    void level() {
        const double y = values_.position(*panel_.level);
        const Segment line{{panel_.frame.x, y}, {panel_.frame.right(), y}};
        svg_.line(line, {ink, 1.2, "1.5 3.5"});
        obstacles_.push_back(line);
    }

    void upright(Point from, Point to) {
        svg_.line({from, to}, {accent, 1.5});
        obstacles_.push_back({from, to});
    }

    void curve(const std::vector<Point>& points, const PanelLine& line) {
        for (std::size_t i = 1; i < points.size(); ++i) {
            obstacles_.push_back({points[i - 1], points[i]});
        }
        const bool alone = axis_.break_position().has_value();
        const std::vector<Point> joined(points.begin(), points.end() - (alone ? 1 : 0));
        svg_.polyline(joined,
                      {line.main ? ink : quiet, line.main ? 2.0 : 1.5, line.main ? "" : "6 3.5"});
        if (alone) {
            svg_.line({points[points.size() - 2], points.back()}, {quiet, 1, "2 4"});
        }
        constexpr double least_gap = 12;
        const bool crowded =
            joined.size() > 1 && joined.back().x - joined[joined.size() - 2].x < least_gap;
        for (const Point& point : points) {
            if (crowded && point.x != points.back().x && point.x != points.front().x) continue;
            svg_.dot(point, line.main ? 2.4 : 2.2, line.main ? ink : "#ffffff",
                     line.main ? ink : quiet);
            take(point, 3);
        }
    }

    void take(Point point, double radius) {
        taken_.push_back({point.x - radius, point.y - radius, 2 * radius, 2 * radius});
    }

    void chosen_point(const std::vector<Point>& points) {
        for (const Point& point : points) {
            if (point.x != choice_x_) continue;
            svg_.dot(point, 4.5, accent, "#ffffff");
            take(point, 5);
        }
    }

    [[nodiscard]] Point point_of(const PanelMark& mark) const {
        return {axis_.position(mark.count), values_.position(mark.value)};
    }

    void draw_mark(const PanelMark& mark) {
        const Point at = point_of(mark);
        const double r = mark_size;
        if (mark.shape == MarkShape::diamond) {
            const double d = r + 1;
            svg_.polygon(
                std::array<Point, 4>{
                    {{at.x, at.y - d}, {at.x + d, at.y}, {at.x, at.y + d}, {at.x - d, at.y}}},
                "none", ink);
        } else {
            svg_.polygon(std::array<Point, 3>{{{at.x, at.y - r - 2},
                                               {at.x + r + 1, at.y + r - 1},
                                               {at.x - r - 1, at.y + r - 1}}},
                         "none", ink);
        }
        take(at, r + 2);
    }

    LabelRequest request(const std::string& text, Weight weight, Point anchor) const {
        const double width = text_width(text, label_size, weight) * wider_font;
        return {width, label_height, anchor, {}};
    }

    // Around a mark: where a falling curve leaves room first.
    void request_mark(const PanelMark& mark) {
        const Point at = point_of(mark);
        LabelRequest label = request(mark.name, Weight::medium, at);
        const double w = label.width;
        const double h = label.height;
        for (const double off : {mark_size + 6, mark_size + 14, mark_size + 24}) {
            label.places.insert(label.places.end(), {{at.x + off, at.y - off - h},
                                                     {at.x + off, at.y - h / 2},
                                                     {at.x - off - w, at.y + off},
                                                     {at.x - off - w, at.y - h / 2},
                                                     {at.x - w / 2, at.y - off - h},
                                                     {at.x - w / 2, at.y + off},
                                                     {at.x + off, at.y + off},
                                                     {at.x - off - w, at.y - off - h}});
        }
        requests_.push_back(std::move(label));
        words_.push_back({mark.name, ink, Weight::medium});
    }

    void request_level() {
        const double y = values_.position(*panel_.level);
        LabelRequest label = request(panel_.level_name, Weight::regular, {panel_.frame.right(), y});
        const double last = panel_.frame.right() - label.width - 8;
        for (double x = last; x > panel_.frame.x; x -= 6) {
            label.places.push_back({x, y - label.height - 4});
            label.places.push_back({x, y + 4});
        }
        label.anchor = {last, y};
        requests_.push_back(std::move(label));
        words_.push_back({panel_.level_name, ink, Weight::regular});
    }

    // Points of a line, and the middles between them, where it can be seen apart from the others
    // and from the foot; all, if there are none. Those a little right of the middle come first.
    [[nodiscard]] std::vector<Point> visible_points(std::size_t line) const {
        const std::vector<Point>& points = points_[line];
        std::vector<Point> visible;
        const auto hidden = [&](std::size_t i) {
            if (points[i].y > panel_.frame.bottom() - 1) return true;
            return std::any_of(points_.begin(), points_.end(), [&](const auto& other) {
                constexpr double apart = 5;
                return &other != &points && std::abs(other[i].y - points[i].y) < apart;
            });
        };
        for (std::size_t i = 0; i < points.size(); ++i) {
            if (hidden(i)) continue;
            visible.push_back(points[i]);
            if (i + 1 == points.size()) continue;
            const Point& next = points[i + 1];
            visible.push_back({(points[i].x + next.x) / 2, (points[i].y + next.y) / 2});
        }
        if (visible.empty()) visible = points;
        const double start = panel_.frame.x + panel_.frame.width * 0.6;
        std::stable_sort(visible.begin(), visible.end(), [start](Point one, Point other) {
            return std::abs(one.x - start) < std::abs(other.x - start);
        });
        return visible;
    }

    // Close to its line, above the upper one and below the lower one.
    void request_line(std::size_t line, bool above) {
        const std::vector<Point> points = visible_points(line);
        LabelRequest label = request(names_[line], Weight::regular, points.front());
        const double w = label.width;
        for (const bool wanted_side : {true, false}) {
            const bool up = above == wanted_side;
            for (const double off : {4.0, 7.0, 11.0, 16.0}) {
                for (const Point& at : points) {
                    const double y = up ? at.y - off - label.height : at.y + off;
                    for (const double x :
                         {up ? at.x + 2 : at.x - 2 - w, at.x - w / 2, up ? at.x + 9 : at.x - 9 - w,
                          up ? at.x - 9 - w : at.x + 9}) {
                        label.places.push_back({x, y});
                    }
                }
            }
        }
        requests_.push_back(std::move(label));
        words_.push_back({names_[line], panel_.lines[line].main ? ink : quiet, Weight::regular});
    }

    [[nodiscard]] double mean_height(std::size_t line) const {
        double sum = 0;
        for (const Point& point : points_[line]) sum += point.y;
        return sum;
    }

    void request_names() {
        for (const PanelMark& mark : panel_.marks) request_mark(mark);
        if (panel_.level) request_level();
        for (std::size_t i = 0; i < points_.size(); ++i) {
            const bool above = points_.size() < 2 || mean_height(i) <= mean_height(1 - i);
            request_line(i, above);
        }
    }

    std::vector<std::string> draw_names() {
        std::vector<std::string> left_over;
        const auto places = place_labels(panel_.frame, obstacles_, taken_, requests_);
        for (std::size_t i = 0; i < places.size(); ++i) {
            if (!places[i]) {
                left_over.push_back(words_[i].text);
                continue;
            }
            const Box& box = places[i]->box;
            if (places[i]->leader) svg_.line(*places[i]->leader, {quiet, 0.75});
            svg_.text({box.x + box.width / 2, box.y + 12.5}, words_[i].text,
                      {label_size, words_[i].weight, words_[i].colour, Anchor::middle});
        }
        return left_over;
    }

    SvgWriter& svg_;
    const Panel& panel_;
    const CountAxis& axis_;
    const std::vector<int>& counts_;
    LogAxis values_;
    double choice_x_;
    std::vector<std::vector<Point>> points_;  // of each line that can be seen
    std::vector<std::string> names_;
    std::vector<Segment> obstacles_;
    std::vector<Box> taken_;
    std::vector<LabelRequest> requests_;
    std::vector<Words> words_;  // of each request
};

}  // namespace

std::vector<std::string> draw_panel(SvgWriter& svg, const Panel& panel, const CountAxis& axis,
                                    const std::vector<int>& counts) {
    return PanelDrawing(svg, panel, axis, counts).draw();
}

}  // namespace tincture
