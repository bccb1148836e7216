#include "sim/store/guarded_driver.h"

#include <algorithm>
#include <iterator>
#include <new>

namespace lacuna {

namespace {

/// HDF5's part comes first: it casts.
struct DriverFile {
    H5FD_t base;
    GuardedFile* bytes;
    haddr_t allocated;  // end of what HDF5 has given out
    haddr_t written;    // end of what it has written, whether or not that succeeded
};

DriverFile& self(H5FD_t* file) { return *reinterpret_cast<DriverFile*>(file); }
const DriverFile& self(const H5FD_t* file) { return *reinterpret_cast<const DriverFile*>(file); }

H5FD_t* open_driver(const char*, unsigned, hid_t access, haddr_t) {
    const auto* info = static_cast<GuardedFile* const*>(H5Pget_driver_info(access));
    if (info == nullptr) return nullptr;
    auto* file = new (std::nothrow) DriverFile{};
    if (file == nullptr) return nullptr;
    file->bytes = *info;
    return &file->base;
}

herr_t close_driver(H5FD_t* file) {
    delete &self(file);
    return 0;
}

herr_t query(const H5FD_t*, unsigned long* features) {
    // Those of HDF5's own default driver, so that the layout is the same.
    if (features != nullptr) {
        *features = H5FD_FEAT_AGGREGATE_METADATA | H5FD_FEAT_ACCUMULATE_METADATA | H5FD_FEAT_DATA_SIEVE |
                    H5FD_FEAT_AGGREGATE_SMALLDATA | H5FD_FEAT_DEFAULT_VFD_COMPATIBLE;
    }
    return 0;
}

haddr_t get_eoa(const H5FD_t* file, H5FD_mem_t) { return self(file).allocated; }
haddr_t get_eof(const H5FD_t* file, H5FD_mem_t) { return self(file).written; }

herr_t set_eoa(H5FD_t* file, H5FD_mem_t, haddr_t end) {
    self(file).allocated = end;
    return 0;
}

herr_t read_driver(H5FD_t* file, H5FD_mem_t, hid_t, haddr_t at, std::size_t size, void* out) {
    self(file).bytes->read(out, size, at);
    return 0;
}

herr_t write_driver(H5FD_t* file, H5FD_mem_t, hid_t, haddr_t at, std::size_t size, const void* from) {
    self(file).bytes->write(from, size, at);
    self(file).written = std::max<haddr_t>(self(file).written, at + size);
    return 0;
}

herr_t truncate_driver(H5FD_t* file, hid_t, hbool_t) {
    self(file).bytes->truncate(self(file).allocated);
    self(file).written = self(file).allocated;
    return 0;
}

H5FD_class_t driver_class() {
    H5FD_class_t driver{};
    driver.name = "guarded";
    driver.maxaddr = (haddr_t{1} << 63) - 1;
    driver.fc_degree = H5F_CLOSE_STRONG;
    driver.fapl_size = sizeof(GuardedFile*);
    driver.open = open_driver;
    driver.close = close_driver;
    driver.query = query;
    driver.get_eoa = get_eoa;
    driver.set_eoa = set_eoa;
    driver.get_eof = get_eof;
    driver.read = read_driver;
    driver.write = write_driver;
    driver.truncate = truncate_driver;
    constexpr H5FD_mem_t free_lists[] = H5FD_FLMAP_DICHOTOMY;
    std::copy(std::begin(free_lists), std::end(free_lists), driver.fl_map);
    return driver;
}

}  // namespace

Handle guarded_driver() {
    const H5FD_class_t description = driver_class();
    return checked(H5FDregister(&description), H5FDunregister, "cannot register a file driver");
}

Handle create_hdf5(GuardedFile& bytes, const Handle& driver, hid_t creation, hid_t access,
                   const std::string& path) {
    GuardedFile* const info = &bytes;
    check(H5Pset_driver(access, driver.id(), &info), path);
    Handle file =
        checked(H5Fcreate(path.c_str(), H5F_ACC_TRUNC, creation, access), H5Fclose, "cannot create " + path);
    bytes.check();
    return file;
}

}  // namespace lacuna
