#include "output/file_calls.h"

#include <fcntl.h>
#include <sys/stat.h>
#include <unistd.h>

#include <cerrno>
#include <cstdio>

namespace tincture {
namespace {

int result(int returned) {
    return returned == 0 ? 0 : errno;
}

int move(const std::filesystem::path& from, const std::filesystem::path& to) {
    if (renameat2(AT_FDCWD, from.c_str(), AT_FDCWD, to.c_str(), RENAME_NOREPLACE) == 0) return 0;
    if (errno != EINVAL && errno != ENOSYS) return errno;
    // Some network file systems have no such flag; look first, which leaves a short gap.
    struct stat status {};
    if (lstat(to.c_str(), &status) == 0) return EEXIST;
    if (errno != ENOENT) return errno;
    return result(rename(from.c_str(), to.c_str()));
}

int write_all(int file, std::string_view bytes) {
    while (!bytes.empty()) {
        const ssize_t written = ::write(file, bytes.data(), bytes.size());
        if (written < 0 && errno == EINTR) continue;
        if (written < 0) return errno;
        if (written == 0) return EIO;
        bytes.remove_prefix(static_cast<std::size_t>(written));
    }
    return 0;
}

int write_file(const std::filesystem::path& path, std::string_view bytes) {
    const int file = open(path.c_str(), O_WRONLY | O_CREAT | O_EXCL | O_CLOEXEC | O_NOFOLLOW, 0666);
    if (file < 0) return errno;
    int error = write_all(file, bytes);
    // Some file systems find out only now that there is no room. EINTR: Linux has closed it all the
    // same.
    if (close(file) != 0 && error == 0 && errno != EINTR) error = errno;
    if (error != 0) unlink(path.c_str());
    return error;
}

}  // namespace

FileCalls::FileCalls()
    : move(tincture::move),
      make_folder([](const Path& path) { return result(mkdir(path.c_str(), 0777)); }),
      remove_folder([](const Path& path) { return result(rmdir(path.c_str())); }),
      write(write_file) {}

std::string plain_words(int error) {
    switch (error) {
        case EACCES:
        case EPERM:
            return "permission denied";
        case ENOSPC:
            return "the disk is full";
        case EDQUOT:
            return "the disk quota is used up";
        case EFBIG:
            return "the file would be larger than is allowed here";
        case EROFS:
            return "the file system is read-only";
        case EEXIST:
        case ENOTEMPTY:
            return "something of that name exists";
        case EISDIR:
            return "it is a folder";
        case ENOTDIR:
            return "a part of the path is a file and no folder";
        case ENOENT:
            return "a part of the path does not exist";
        case ENAMETOOLONG:
            return "the name is too long";
        case ELOOP:
            return "too many links lead to it";
        case EXDEV:
            return "it lies on another file system";
        case EBUSY:
            return "something else is using it";
        case EMFILE:
        case ENFILE:
            return "too many files are open";
        case EIO:
            return "the disk reports an error";
        default:
            return "the system reports error " + std::to_string(error);
    }
}

}  // namespace tincture
