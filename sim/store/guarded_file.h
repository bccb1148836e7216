// The bytes below an HDF5 file that is being written. HDF5 1.10 crashes when it closes a file after a
// failed write, so it never learns of one: the first failure is kept here, what comes after it is taken
// without writing, and the writer asks between steps.
#pragma once

#include <cstddef>
#include <cstdint>
#include <string>

namespace lacuna {

class GuardedFile {
public:
    /// Makes `path`, replacing what is left there by a dead process of the same number. Messages speak of
    /// `shown`. Throws RunError.
    GuardedFile(std::string path, std::string shown);
    GuardedFile(const GuardedFile&) = delete;
    GuardedFile& operator=(const GuardedFile&) = delete;
    ~GuardedFile();

    /// Throws RunError, with what the system said and what to do, once a write has failed.
    void check() const;
    /// Everything to the disk itself, then as check().
    void sync();

    // What the driver calls; failures are kept, not told.
    void write(const void* bytes, std::size_t size, std::uint64_t at) noexcept;
    void read(void* bytes, std::size_t size, std::uint64_t at) noexcept;
    void truncate(std::uint64_t size) noexcept;

private:
    std::string shown_;
    int descriptor_;
    int failure_ = 0;  // errno of the first failure
};

}  // namespace lacuna
