// Loads what tincture loads, decodes a picture and ends: the least that any run on it takes.
#include <cstdio>

#include "picture/read.h"

int main(int argc, char** argv) {
    if (argc != 2) return 2;
    return tincture::read_picture(argv[1]).pixel_count() > 0 ? 0 : 1;
}
