#include "sim/store/guarded_file.h"

#include <fcntl.h>
#include <fmt/format.h>
#include <unistd.h>

#include <cerrno>
#include <cstring>

#include "sim/base/fault.h"

namespace lacuna {

namespace {

std::string message(const std::string& path, int error) {
    switch (error) {
        case ENOSPC:
            return fmt::format("disk full: cannot write {} ({}): free space, or write elsewhere with -o", path,
                               std::strerror(error));
        case EDQUOT:
            return fmt::format(
                "disk full: cannot write {} ({}): free some of your quota, or write elsewhere with -o", path,
                std::strerror(error));
        case EFBIG:
            return fmt::format("cannot write {} ({}): raise the limit on file sizes (ulimit -f)", path,
                               std::strerror(error));
        default:
            return fmt::format("cannot write {} ({}): write elsewhere with -o", path, std::strerror(error));
    }
}

}  // namespace

GuardedFile::GuardedFile(std::string path, std::string shown) : shown_(std::move(shown)) {
    ::unlink(path.c_str());
    descriptor_ = ::open(path.c_str(), O_RDWR | O_CREAT | O_EXCL | O_CLOEXEC, 0666);
    if (descriptor_ < 0) throw RunError(message(shown_, errno));
}

GuardedFile::~GuardedFile() { ::close(descriptor_); }

void GuardedFile::check() const {
    if (failure_ != 0) throw RunError(message(shown_, failure_));
}

void GuardedFile::sync() {
    if (failure_ == 0 && ::fsync(descriptor_) != 0) failure_ = errno;
    check();
}

void GuardedFile::write(const void* bytes, std::size_t size, std::uint64_t at) noexcept {
    const auto* from = static_cast<const char*>(bytes);
    while (size > 0 && failure_ == 0) {
        const ssize_t done = ::pwrite(descriptor_, from, size, static_cast<off_t>(at));
        if (done > 0) {
            from += done;
            at += static_cast<std::uint64_t>(done);
            size -= static_cast<std::size_t>(done);
        } else if (done == 0 || errno != EINTR) {
            failure_ = done == 0 ? ENOSPC : errno;
        }
    }
}

void GuardedFile::read(void* bytes, std::size_t size, std::uint64_t at) noexcept {
    auto* to = static_cast<char*>(bytes);
    while (size > 0) {
        const ssize_t done = ::pread(descriptor_, to, size, static_cast<off_t>(at));
        if (done < 0 && errno == EINTR) continue;
        if (done <= 0) {
            if (done < 0 && failure_ == 0) failure_ = errno;
            std::memset(to, 0, size);  // beyond the end, as in a file with a hole
            return;
        }
        to += done;
        at += static_cast<std::uint64_t>(done);
        size -= static_cast<std::size_t>(done);
    }
}

void GuardedFile::truncate(std::uint64_t size) noexcept {
    if (failure_ == 0 && ::ftruncate(descriptor_, static_cast<off_t>(size)) != 0) failure_ = errno;
}

}  // namespace lacuna
