// curve.csv: the error curve as a table.
#pragma once

#include <string>

#include "choose/study.h"

namespace tincture {

// Columns count,evidence_mse,mse,mean_de00,p95_de00,max_de00,closest_pair_de00, one row a count;
// mean squared errors are in dE76 squared with 6 decimals, CIEDE2000 has 4; a single colour has no
// closest pair: empty.
[[nodiscard]] std::string curve_csv(const Study& study);

}  // namespace tincture
