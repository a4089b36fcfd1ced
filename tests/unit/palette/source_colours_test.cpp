#include "palette/source_colours.h"

#include <gtest/gtest.h>

#include "colour/delta_e.h"
#include "tests/support/random.h"

namespace tincture {
namespace {

using test_support::Random;

struct Colour {
    Lab lab;
    std::uint64_t count;
};

ColourTable table_of(const std::vector<Colour>& colours) {
    ColourTable table;
    for (const Colour& colour : colours) {
        table.key.push_back(table.key.size());
        table.L.push_back(static_cast<float>(colour.lab.L));
        table.a.push_back(static_cast<float>(colour.lab.a));
        table.b.push_back(static_cast<float>(colour.lab.b));
        table.count.push_back(colour.count);
        table.opaque_pixels += colour.count;
    }
    return table;
}

void expect_lab(const Lab& lab, double L, double a, double b) {
    EXPECT_NEAR(lab.L, L, 1e-6);
    EXPECT_NEAR(lab.a, a, 1e-6);
    EXPECT_NEAR(lab.b, b, 1e-6);
}

TEST(MovedToSource, IsTheInkOfCleanArt) {
    const ColourTable table = table_of({{{20, 5, 5}, 800},
                                        {{25, 5, 5}, 60},
                                        {{35, 5, 5}, 40},
                                        {{90, 0, 5}, 5000},
                                        {{80, 0, 5}, 300}});
    const std::vector<Lab> centres = {{21, 5, 5}, {89.4, 0, 5}};
    const std::vector<Lab> moved = moved_to_source(centres, 0, table);
    expect_lab(moved[0], 20, 5, 5);
    expect_lab(moved[1], 90, 0, 5);
    // Kept colours stay where they were put.
    expect_lab(moved_to_source(centres, 1, table)[0], 21, 5, 5);
    expect_lab(moved_to_source(centres, 1, table)[1], 90, 0, 5);
}

TEST(MovedToSource, TakesThreeTenthsOnlyNearby) {
    std::vector<Colour> colours = {{{50, 0, 0}, 360}};
    for (int i = 1; i <= 100; ++i) colours.push_back({{50 + 0.02 * i, 0.05 * i, 0}, 8});
    expect_lab(moved_to_source(std::vector<Lab>{{51, 2, 0}}, 0, table_of(colours))[0], 50, 0, 0);
    expect_lab(moved_to_source(std::vector<Lab>{{52, 4, 0}}, 0, table_of(colours))[0], 52, 4, 0);
    colours[0].count = 320;  // less than three tenths
    expect_lab(moved_to_source(std::vector<Lab>{{51, 2, 0}}, 0, table_of(colours))[0], 51, 2, 0);
}

// Two clouds and nothing between them: a single colour for both is one of theirs.
TEST(MovedToSource, IsNoMeanBetweenTwo) {
    Random random(81);
    std::vector<Colour> colours;
    for (int i = 0; i < 500; ++i) {
        const double L = i < 300 ? 30 : 70;
        colours.push_back(
            {{L + random.between(-3, 3), random.between(-3, 3), random.between(-3, 3)},
             1 + random.below(4)});
    }
    const ColourTable table = table_of(colours);
    const Lab moved = moved_to_source(std::vector<Lab>{{46, 0, 0}}, 0, table)[0];
    double near = 0;
    for (const Colour& colour : colours) {
        if (delta_e_2000(colour.lab, moved) <= 3) near += static_cast<double>(colour.count);
    }
    EXPECT_GE(near, 0.01 * static_cast<double>(table.opaque_pixels));
    // A mean that is there already stays.
    expect_lab(moved_to_source(std::vector<Lab>{{30, 0, 0}}, 0, table)[0], 30, 0, 0);
}

TEST(MovedToSource, OfCellsTakesNoCellForAColour) {
    ColourTable table = table_of({{{50, 0, 0}, 900}, {{51, 1, 0}, 100}});
    table.cell_de = 0.25;
    expect_lab(moved_to_source(std::vector<Lab>{{50.1, 0.1, 0}}, 0, table)[0], 50.1, 0.1, 0);
}

}  // namespace
}  // namespace tincture
