// Lets HDF5 write through a GuardedFile.
#pragma once

#include <string>

#include "sim/store/guarded_file.h"
#include "sim/store/handle.h"

namespace lacuna {

/// Makes the driver known to HDF5. The handle must outlive the files that use it: 1.10 gives the driver up
/// before it calls it for the last time.
Handle guarded_driver();

/// A new HDF5 file, made by `creation` and `access` properties, whose bytes go to `bytes`, which must
/// outlive it. Throws RunError.
Handle create_hdf5(GuardedFile& bytes, const Handle& driver, hid_t creation, hid_t access, const std::string& path);

}  // namespace lacuna
