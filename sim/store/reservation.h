// Disk space taken before HDF5 writes into it. HDF5 1.10 crashes when it closes a file after a failed
// write, so a full disk must be noticed before the library sees it.
#pragma once

#include <cstdint>
#include <string>

namespace lacuna {

/// Keeps room at the end of a file that something else writes.
class Reservation {
public:
    /// `path` must exist. Throws RunError when it cannot be opened.
    explicit Reservation(std::string path);
    Reservation(const Reservation&) = delete;
    Reservation& operator=(const Reservation&) = delete;
    ~Reservation();

    /// Makes sure that the file can grow by `bytes` beyond what was asked for so far. Throws RunError
    /// with what is missing when the disk, a quota or a limit on file sizes does not allow it.
    void grow(std::uint64_t bytes);

    /// Gives back what was taken beyond the file's end.
    void release_rest();

    /// Writes everything to the disk itself. Throws RunError.
    void sync();

private:
    std::string path_;
    int descriptor_;
    std::uint64_t wanted_ = 0;    // bytes asked for
    std::uint64_t reserved_ = 0;  // bytes taken
};

}  // namespace lacuna
