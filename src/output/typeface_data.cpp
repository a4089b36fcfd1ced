// Roboto (Apache-2.0) as bytes of the program. The build names the files.
#include "output/typeface_data.h"

#define TINCTURE_EMBED(symbol, file)                                \
    asm(".pushsection .rodata\n"                                    \
        ".global tincture_" symbol "\n.balign 16\ntincture_" symbol \
        ":\n"                                                       \
        ".incbin \"" file                                           \
        "\"\n"                                                      \
        ".byte 0\n.popsection\n")

TINCTURE_EMBED("roboto_regular", TINCTURE_FONT_REGULAR);
TINCTURE_EMBED("roboto_medium", TINCTURE_FONT_MEDIUM);
