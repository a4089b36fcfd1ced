#include "picture/tiff_file.h"

#include <unistd.h>

#include <cerrno>
#include <cstdarg>
#include <cstring>
#include <new>

namespace tincture::formats {
namespace {

tmsize_t on_read(thandle_t handle, void* to, tmsize_t size) {
    auto* input = static_cast<TiffInput*>(handle);
    tmsize_t done = 0;
    while (done < size) {
        const ssize_t got =
            ::pread(input->descriptor, static_cast<char*>(to) + done,
                    static_cast<std::size_t>(size - done), static_cast<off_t>(input->position));
        if (got < 0 && errno == EINTR) continue;
        if (got <= 0) break;
        input->position += static_cast<std::uint64_t>(got);
        done += got;
    }
    return done;
}
tmsize_t on_write(thandle_t, void*, tmsize_t) {
    return -1;
}
toff_t on_seek(thandle_t handle, toff_t offset, int whence) {
    auto* input = static_cast<TiffInput*>(handle);
    if (whence == SEEK_SET) input->position = offset;
    if (whence == SEEK_CUR) input->position += offset;
    if (whence == SEEK_END) input->position = input->size + offset;
    return input->position;
}
int on_close(thandle_t) {
    return 0;
}
toff_t on_size(thandle_t handle) {
    return static_cast<TiffInput*>(handle)->size;
}
int on_map(thandle_t, void**, toff_t*) {
    return 0;
}
void on_unmap(thandle_t, void*, toff_t) {}

// 1: the message is dealt with and goes nowhere else.
int on_error(TIFF*, void* handle, const char*, const char*, std::va_list) {
    static_cast<TiffInput*>(handle)->complained = true;
    return 1;
}
// Warnings about the directory are mostly tags of other programs. That a tag lies outside of the
// file is none of those, and every warning about pixels means that some are made up.
int on_warning(TIFF*, void* handle, const char*, const char* format, std::va_list) {
    auto* input = static_cast<TiffInput*>(handle);
    if (input->decoding || std::strstr(format, "IO error") != nullptr) input->complained = true;
    return 1;
}

// libtiff does not say why; most often the directory is at the end of a file that lost it.
[[noreturn]] void refuse_directory(const Source& source) {
    std::uint8_t head[16] = {};
    const ssize_t got = ::pread(source.descriptor, head, sizeof head, 0);
    const bool big_endian = head[0] == 'M';
    const std::uint64_t low = big_endian ? big32(head + 4) : little32(head + 4);
    const std::uint64_t directory =
        (big_endian ? big16(head + 2) : little16(head + 2)) == 42 ? low
        : big_endian ? std::uint64_t{big32(head + 8)} << 32 | big32(head + 12)
                     : little32(head + 8) | std::uint64_t{little32(head + 12)} << 32;
    if (got < static_cast<ssize_t>(sizeof head) || directory >= source.file_size) {
        refuse_cut_short(source, "a TIFF that ends after " + std::to_string(source.file_size) +
                                     " bytes, before its directory");
    }
    refuse_damaged(source, "a TIFF whose directory makes no sense");
}

}  // namespace

TiffHandle open_tiff(const Source& source, TiffInput& input) {
    const std::unique_ptr<TIFFOpenOptions, decltype(&TIFFOpenOptionsFree)> options(
        TIFFOpenOptionsAlloc(), &TIFFOpenOptionsFree);
    if (options == nullptr) throw std::bad_alloc();
    TIFFOpenOptionsSetErrorHandlerExtR(options.get(), on_error, &input);
    TIFFOpenOptionsSetWarningHandlerExtR(options.get(), on_warning, &input);
    TIFFOpenOptionsSetMaxSingleMemAlloc(
        options.get(), static_cast<tmsize_t>(source.file_size + tiff_decoder_memory));
    // "c": no cutting of long strips into short ones.
    TiffHandle tiff(TIFFClientOpenExt("", "rmc", &input, on_read, on_write, on_seek, on_close,
                                      on_size, on_map, on_unmap, options.get()));
    if (tiff == nullptr || input.complained) refuse_directory(source);
    return tiff;
}

}  // namespace tincture::formats
