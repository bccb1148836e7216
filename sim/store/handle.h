// Owning handles for HDF5 identifiers: they move, close themselves, and never throw from a destructor.
#pragma once

#include <hdf5.h>

#include <string>
#include <utility>

#include "sim/base/fault.h"

namespace lacuna {

class Handle {
public:
    using Close = herr_t (*)(hid_t);

    Handle() = default;
    Handle(hid_t id, Close closer) : id_(id), close_(closer) {}
    Handle(const Handle&) = delete;
    Handle& operator=(const Handle&) = delete;
    Handle(Handle&& other) noexcept : id_(std::exchange(other.id_, -1)), close_(other.close_) {}
    Handle& operator=(Handle&& other) noexcept {
        if (this != &other) {
            reset();
            id_ = std::exchange(other.id_, -1);
            close_ = other.close_;
        }
        return *this;
    }
    ~Handle() { reset(); }

    hid_t id() const { return id_; }
    bool open() const { return id_ >= 0; }
    void reset() noexcept {
        if (id_ >= 0) close_(id_);
        id_ = -1;
    }
    /// Closes and tells whether that succeeded, which a destructor cannot.
    bool close() noexcept {
        const bool ok = id_ < 0 || close_(id_) >= 0;
        id_ = -1;
        return ok;
    }

private:
    hid_t id_ = -1;
    Close close_ = nullptr;
};

/// What HDF5 says went wrong last, innermost first: "unable to open file (file signature not found)".
std::string hdf5_reason();

/// Switches HDF5's own printing of errors off, for this thread.
void silence_hdf5();

/// `id` as an owning handle, or a RunError "<what>: <HDF5's reason>".
Handle checked(hid_t id, Handle::Close closer, const std::string& what);

/// Throws a RunError "<what>: <HDF5's reason>" when `status` is negative.
void check(herr_t status, const std::string& what);

}  // namespace lacuna
