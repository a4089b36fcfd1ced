#include "choose/criteria.h"
#include "support/format.h"

namespace tincture {

// How many colours stand out in flat areas: the modes of the evidence (after Fukunaga, Hostetler
// 1975, IEEE Trans. Information Theory 21:32-40).
Vote inks_vote(const Study& study) {
    if (!study.evidence.inks || *study.evidence.inks < 1 || study.evidence.kind != "flat art") {
        return {"inks", std::nullopt, "there are too few flat areas to count inks in"};
    }
    const int count = *study.evidence.inks;
    return {"inks", count,
            colours(count) + (count == 1 ? " stands" : " stand") +
                " out in flat areas, which are " +
                fixed(100 * study.evidence.flat_share.value_or(0), 0) + " % of the picture"};
}

}  // namespace tincture
