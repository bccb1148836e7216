#include "sim/store/reservation.h"

#include <fcntl.h>
#include <fmt/format.h>
#include <sys/resource.h>
#include <sys/stat.h>
#include <sys/statvfs.h>
#include <unistd.h>

#include <algorithm>
#include <cerrno>
#include <cstring>

#include "sim/base/fault.h"

namespace lacuna {

namespace {

constexpr std::uint64_t largest_step = 64u << 20;
constexpr std::uint64_t smallest_step = 64u << 10;

std::string remedy(int error) {
    switch (error) {
        case ENOSPC: return "free space, or write elsewhere with -o";
        case EDQUOT: return "your quota is used up: free space, or write elsewhere with -o";
        case EFBIG: return "the limit on file sizes is reached (ulimit -f)";
        default: return "write elsewhere with -o";
    }
}

/// Free bytes where fallocate is not to be had; then a check must do.
bool seems_free(int descriptor, std::uint64_t bytes) {
    struct statvfs info {};
    if (fstatvfs(descriptor, &info) != 0) return true;
    return static_cast<std::uint64_t>(info.f_bavail) * info.f_frsize > bytes;
}

/// fallocate does not look at this limit when it keeps the file's size.
bool exceeds_limit(std::uint64_t bytes) {
    struct rlimit limit {};
    return getrlimit(RLIMIT_FSIZE, &limit) == 0 && limit.rlim_cur != RLIM_INFINITY && bytes > limit.rlim_cur;
}

}  // namespace

Reservation::Reservation(std::string path) : path_(std::move(path)), descriptor_(::open(path_.c_str(), O_RDWR | O_CLOEXEC)) {
    if (descriptor_ < 0) throw RunError(fmt::format("cannot open {}: {}", path_, std::strerror(errno)));
}

Reservation::~Reservation() { ::close(descriptor_); }

void Reservation::grow(std::uint64_t bytes) {
    wanted_ += bytes;
    if (wanted_ <= reserved_) return;
    // In steps that grow with the file: small files stay small, large ones do not ask for every chunk.
    const std::uint64_t step = std::clamp(wanted_ / 8, smallest_step, largest_step);
    const std::uint64_t target = wanted_ + step;
    int error = exceeds_limit(target) ? EFBIG : 0;
    if (error == 0) error = ::fallocate(descriptor_, FALLOC_FL_KEEP_SIZE, 0, static_cast<off_t>(target)) == 0 ? 0 : errno;
    if (error == EOPNOTSUPP || error == ENOSYS || error == EINVAL) {
        error = seems_free(descriptor_, target - reserved_) ? 0 : ENOSPC;
    }
    if (error != 0) {
        throw RunError(fmt::format("cannot write {}: {}; {} more bytes were needed ({})", path_, std::strerror(error),
                                   target - reserved_, remedy(error)));
    }
    reserved_ = target;
}

void Reservation::release_rest() {
    struct stat info {};
    if (fstat(descriptor_, &info) == 0 && ftruncate(descriptor_, info.st_size) == 0) reserved_ = wanted_ = 0;
}

void Reservation::sync() {
    if (::fsync(descriptor_) != 0) throw RunError(fmt::format("cannot write {}: {}", path_, std::strerror(errno)));
}

}  // namespace lacuna
