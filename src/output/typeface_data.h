#pragma once

extern "C" {
// TrueType files, as Debian ships them; a damaged one is the build's fault and is not expected.
extern const unsigned char tincture_roboto_regular[];
extern const unsigned char tincture_roboto_medium[];
}
