add_library(tincture_options INTERFACE)

# Results must not depend on the processor: no fused multiply-add where the source has two steps.
target_compile_options(tincture_options INTERFACE
    -ffp-contract=off -Wall -Wextra -Wpedantic -Wshadow -Wconversion -Wno-sign-conversion)
if(CMAKE_CXX_COMPILER_ID STREQUAL "Clang")
    # A float literal of a constant that the other compiler takes as well.
    target_compile_options(tincture_options INTERFACE -Wno-implicit-int-float-conversion)
endif()
if(CMAKE_CXX_COMPILER_ID STREQUAL "GNU" AND CMAKE_CXX_COMPILER_VERSION VERSION_LESS 13)
    # Reports impossible overlaps for "text" + std::string (GCC bug 105651).
    target_compile_options(tincture_options INTERFACE -Wno-restrict)
endif()
if(TINCTURE_WERROR)
    target_compile_options(tincture_options INTERFACE -Werror)
endif()
if(TINCTURE_SANITIZE)
    target_compile_options(tincture_options INTERFACE
        -fsanitize=${TINCTURE_SANITIZE} -fno-sanitize-recover=all -fno-omit-frame-pointer)
    target_link_options(tincture_options INTERFACE -fsanitize=${TINCTURE_SANITIZE})
endif()
