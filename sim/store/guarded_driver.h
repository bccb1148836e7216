// Lets HDF5 write through a GuardedFile.
#pragma once

#include <string>

#include "sim/store/guarded_file.h"
#include "sim/store/handle.h"

namespace lacuna {

/// A new HDF5 file, made by `creation` and `access` properties, whose bytes go to `bytes`, which must
/// outlive it. Throws RunError.
Handle create_hdf5(GuardedFile& bytes, hid_t creation, hid_t access, const std::string& path);

}  // namespace lacuna
