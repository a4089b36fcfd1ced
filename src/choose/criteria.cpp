#include "choose/criteria.h"

namespace tincture {

std::span<const CurvePoint> swept(const Study& study) {
    std::size_t n = study.curve.empty() ? 0 : 1;
    while (n < study.curve.size() && study.curve[n].count == study.curve[n - 1].count + 1) ++n;
    return {study.curve.data(), n};
}

std::vector<Vote> collect_votes(const Study& study) {
    return {inks_vote(study),
            knee_vote(study),
            look_alikes_vote(study),
            tolerance_vote(study),
            description_length_vote(study),
            stability_vote(study),
            distinct_colours_vote(study),
            second_difference_vote(study)};
}

}  // namespace tincture
