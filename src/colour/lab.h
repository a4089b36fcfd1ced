#pragma once

namespace tincture {

// CIELAB, D50, 2 degree observer: L 0 to 100, a and b about -128 to 128 (more in wide spaces).
struct Lab {
    double L = 0;
    double a = 0;
    double b = 0;
};

}  // namespace tincture
