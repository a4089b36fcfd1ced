#include "choose/criteria.h"

namespace tincture {

Vote distinct_colours_vote(const Study& study) {
    const std::uint64_t distinct = study.picture.distinct_colours;
    if (study.picture.colour_cell_de || distinct > static_cast<std::uint64_t>(study.at_most)) {
        return {"distinct colours", std::nullopt,
                "the picture has more different colours than the range allows"};
    }
    const int count = static_cast<int>(distinct);
    return {"distinct colours", count,
            count == 1 ? "the picture is of one colour only"
                       : "the picture has exactly " + std::to_string(count) +
                             " different colours: so many reproduce it without any error"};
}

}  // namespace tincture
