#include "output/place_labels.h"

#include <algorithm>

namespace tincture {
namespace {

constexpr double clearance = 3;
constexpr double grid_step = 6;

Box grown(const Box& box, double by) {
    return {box.x - by, box.y - by, box.width + 2 * by, box.height + 2 * by};
}

Point nearest_in(const Box& box, Point point) {
    return {std::clamp(point.x, box.x, box.right()), std::clamp(point.y, box.y, box.bottom())};
}

double squared_distance(Point one, Point other) {
    const double dx = one.x - other.x;
    const double dy = one.y - other.y;
    return dx * dx + dy * dy;
}

class Placer {
  public:
    Placer(const Box& frame, std::span<const Segment> lines, std::span<const Box> taken)
        : frame_(frame), lines_(lines.begin(), lines.end()), taken_(taken.begin(), taken.end()) {}

    std::optional<LabelPlace> place(const LabelRequest& request) {
        for (const Point& corner : request.places) {
            const Box box{corner.x, corner.y, request.width, request.height};
            if (!is_free(box)) continue;
            taken_.push_back(box);
            return LabelPlace{box, std::nullopt};
        }
        return place_apart(request);
    }

  private:
    [[nodiscard]] bool is_free(const Box& box) const {
        const Box room = grown(box, clearance);
        return contains(frame_, room) &&
               std::none_of(taken_.begin(), taken_.end(),
                            [&](const Box& other) { return overlap(room, other); }) &&
               std::none_of(lines_.begin(), lines_.end(),
                            [&](const Segment& line) { return crosses(line, room); });
    }

    // A leader may cross lines, but no label; the mark that it leads to does not count.
    [[nodiscard]] bool leads_freely(const Segment& leader) const {
        return std::none_of(taken_.begin(), taken_.end(), [&](const Box& other) {
            return crosses(leader, other) && !contains(other, {leader.to.x, leader.to.y, 0, 0});
        });
    }

    std::optional<LabelPlace> place_apart(const LabelRequest& request) {
        std::optional<LabelPlace> best;
        double best_distance = 0;
        for (double y = frame_.y; y < frame_.bottom(); y += grid_step) {
            for (double x = frame_.x; x < frame_.right(); x += grid_step) {
                const Box box{x, y, request.width, request.height};
                const Point end = nearest_in(box, request.anchor);
                const double distance = squared_distance(end, request.anchor);
                if (best && distance >= best_distance) continue;
                const Segment leader{end, request.anchor};
                if (!is_free(box) || !leads_freely(leader)) continue;
                best = LabelPlace{box, leader};
                best_distance = distance;
            }
        }
        if (best) {
            taken_.push_back(best->box);
            lines_.push_back(*best->leader);
        }
        return best;
    }

    Box frame_;
    std::vector<Segment> lines_;
    std::vector<Box> taken_;
};

}  // namespace

std::vector<std::optional<LabelPlace>> place_labels(const Box& frame,
                                                    std::span<const Segment> lines,
                                                    std::span<const Box> taken,
                                                    std::span<const LabelRequest> requests) {
    Placer placer(frame, lines, taken);
    std::vector<std::optional<LabelPlace>> places;
    places.reserve(requests.size());
    for (const LabelRequest& request : requests) places.push_back(placer.place(request));
    return places;
}

}  // namespace tincture
