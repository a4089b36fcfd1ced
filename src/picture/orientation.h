// Turning a picture upright.
#pragma once

#include "picture/picture.h"

namespace tincture {

// `orientation` as in TIFF 6.0 and EXIF, where the first row and first column of the stored picture
// are: 1 top left (nothing to do), 2 top right, 3 bottom right, 4 bottom left, 5 left top,
// 6 right top, 7 right bottom, 8 left bottom. Anything else is taken as 1. Turns samples, the
// opaque plane, the sides and the resolution; takes the memory of one more copy of the samples
// meanwhile.
void apply_orientation(Picture& picture, int orientation);

}  // namespace tincture
