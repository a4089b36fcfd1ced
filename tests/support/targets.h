// Running something once for each instruction set that this processor has.
#pragma once

#include <hwy/targets.h>

#include <cstdint>
#include <functional>
#include <string>

namespace tincture::test_support {

// Calls body(name) with each set alone in use, plain code last; returns how many there were.
inline int for_each_instruction_set(const std::function<void(const std::string&)>& body) {
    const std::vector<std::int64_t> targets = hwy::SupportedAndGeneratedTargets();
    for (const std::int64_t target : targets) {
        hwy::SetSupportedTargetsForTest(target);
        hwy::GetChosenTarget().Update(target);
        body(hwy::TargetName(target));
    }
    hwy::SetSupportedTargetsForTest(0);
    hwy::GetChosenTarget().DeInit();
    return static_cast<int>(targets.size());
}

}  // namespace tincture::test_support
