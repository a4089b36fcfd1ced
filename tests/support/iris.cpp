#include "tests/support/iris.h"

#include <limits>

#include "cluster/kmeans.h"
#include "tests/support/points.h"
#include "tests/support/published.h"

namespace tincture::test_support {

WeightedPoints iris_points() {
    const PublishedTable table = read_published("iris.csv");
    Rows rows;
    for (std::size_t i = 0; i < table.rows.size(); ++i) {
        std::vector<double> row;
        for (const std::string& column : table.columns) row.push_back(table.number(i, column));
        rows.push_back(row);
    }
    return points_from(rows, std::vector<double>(rows.size(), 1.0));
}

std::vector<double> iris_best_known() {
    const PublishedTable table = read_published("kmeans_reference.csv");
    std::vector<double> best;
    for (std::size_t i = 0; i < table.rows.size(); ++i) {
        if (table.text(i, "weights") == "unit") best.push_back(table.number(i, "wss_R"));
    }
    return best;
}

Clustered best_of_starts(const WeightedPoints& points, int count, double enough, int starts) {
    Random random(static_cast<std::uint64_t>(count));
    Clustered best;
    best.W = std::numeric_limits<double>::infinity();
    for (int start = 0; start < starts && best.W > enough * (1 + 1e-7); ++start) {
        Centres centres = points_as_centres(points, count, random);
        Partition partition(points, count);
        const double W = lloyd(points, centres, 0, {100, 0}, partition);
        if (W >= best.W) continue;
        best = {centres, W, {}};
        for (int k = 0; k < count; ++k) best.sizes.push_back(partition.weight(k));
    }
    return best;
}

}  // namespace tincture::test_support
