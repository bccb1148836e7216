// Files made by others with HDF5 itself: what an outcome file may not hold is refused before it is read.
#include <hdf5.h>

#include <catch2/catch.hpp>

#include "tests/unit/store/sample_outcome.h"

using namespace lacuna;
using namespace lacuna::sample_outcome;

namespace {

void put_text(hid_t object, const char* name, const std::string& text) {
    const hid_t type = H5Tcopy(H5T_C_S1);
    H5Tset_size(type, text.size());
    const hid_t space = H5Screate(H5S_SCALAR);
    const hid_t attribute = H5Acreate2(object, name, type, space, H5P_DEFAULT, H5P_DEFAULT);
    H5Awrite(attribute, type, text.data());
    H5Aclose(attribute);
    H5Sclose(space);
    H5Tclose(type);
}

void put_integer(hid_t object, const char* name, int value) {
    const hid_t space = H5Screate(H5S_SCALAR);
    const hid_t attribute = H5Acreate2(object, name, H5T_STD_I32BE, space, H5P_DEFAULT, H5P_DEFAULT);
    H5Awrite(attribute, H5T_NATIVE_INT, &value);
    H5Aclose(attribute);
    H5Sclose(space);
}

/// A file with a table "studies", which `fill` fills: (file, table).
template <class Fill>
std::string made(const std::string& path, Fill&& fill, int version = 1, const char* format = "lacuna outcomes") {
    const hid_t file = H5Fcreate(path.c_str(), H5F_ACC_TRUNC, H5P_DEFAULT, H5P_DEFAULT);
    put_text(file, "format", format);
    put_integer(file, "format_version", version);
    const hid_t table = H5Gcreate2(file, "studies", H5P_DEFAULT, H5P_DEFAULT, H5P_DEFAULT);
    fill(file, table);
    H5Gclose(table);
    H5Fclose(file);
    return message_of(path);
}

/// A dataset of `rows` doubles, or of `type`, with creation properties of its own, nothing written.
void put_column(hid_t table, const char* name, hsize_t rows, hid_t properties, hid_t type = H5T_IEEE_F64LE,
                int rank = 1) {
    const hsize_t size[2] = {rows, 1};
    const hid_t space = H5Screate_simple(rank, size, nullptr);
    const hid_t dataset = H5Dcreate2(table, name, type, space, H5P_DEFAULT, properties, H5P_DEFAULT);
    const std::vector<double> zeros(rows < 1000 ? 2 * rows : 0);
    if (!zeros.empty()) H5Dwrite(dataset, type, H5S_ALL, H5S_ALL, H5P_DEFAULT, zeros.data());
    H5Dclose(dataset);
    H5Sclose(space);
}

hid_t chunked(hsize_t rows) {
    const hid_t properties = H5Pcreate(H5P_DATASET_CREATE);
    H5Pset_chunk(properties, 1, &rows);
    return properties;
}

template <class Fill>
void check_refused(const std::string& path, const std::string& why, Fill&& fill) {
    INFO(why);
    CHECK_THAT(made(path, fill), Catch::Contains(why) && Catch::StartsWith(path));
}

}  // namespace

TEST_CASE("Files of other programs and newer formats say so", "[store]") {
    const Folder folder;
    const auto nothing = [](hid_t, hid_t) {};
    CHECK(made(folder / "a.h5", nothing).empty());
    CHECK_THAT(made(folder / "a.h5", nothing, 1, "something else"),
               Catch::Contains("HDF5 file of another program"));
    CHECK_THAT(made(folder / "a.h5", nothing, 2), Catch::Contains("newer lacuna (format 2)") &&
                                                      Catch::Contains("reads up to 1") &&
                                                      Catch::Contains("use a newer program"));
    CHECK_THAT(made(folder / "a.h5", nothing, 0), Catch::Contains("damaged"));
}

TEST_CASE("Columns that point elsewhere are refused", "[store]") {
    const Folder folder;
    std::ofstream(folder / "secret") << std::string(800, 's');
    const auto refused = [&](const std::string& why, const auto& fill) {
        check_refused(folder / "a.h5", why, fill);
    };
    refused("another file", [&](hid_t, hid_t table) {
        const hid_t properties = H5Pcreate(H5P_DATASET_CREATE);
        H5Pset_external(properties, (folder / "secret").c_str(), 0, 800);
        put_column(table, "x", 100, properties);
        H5Pclose(properties);
    });
    refused("stored in a way", [&](hid_t, hid_t table) {
        const hid_t properties = H5Pcreate(H5P_DATASET_CREATE);
        const hsize_t size = 100;
        const hid_t space = H5Screate_simple(1, &size, nullptr);
        H5Pset_virtual(properties, space, (folder / "secret").c_str(), "/x", space);
        put_column(table, "x", 100, properties);
        H5Sclose(space);
        H5Pclose(properties);
    });
    refused("links to elsewhere", [&](hid_t, hid_t table) {
        H5Lcreate_external((folder / "secret").c_str(), "/x", table, "x", H5P_DEFAULT, H5P_DEFAULT);
    });
    refused("links to elsewhere",
            [&](hid_t file, hid_t) { H5Lcreate_soft("/studies", file, "labs", H5P_DEFAULT, H5P_DEFAULT); });
}

TEST_CASE("Columns that claim what cannot be are refused", "[store]") {
    const Folder folder;
    const auto refused = [&](const std::string& why, const auto& fill) {
        check_refused(folder / "a.h5", why, fill);
    };
    for (const hsize_t rows : {hsize_t{1} << 40, hsize_t{1} << 50}) {
        refused("more than the file can hold", [&](hid_t, hid_t table) {
            const hid_t properties = chunked(65536);
            put_column(table, "x", rows, properties);
            H5Pclose(properties);
        });
    }
    refused("nothing is stored", [&](hid_t, hid_t table) {
        const hid_t properties = chunked(1024);
        put_column(table, "x", 2000, properties);
        H5Pclose(properties);
    });
    refused("too large", [&](hid_t, hid_t table) {
        const hsize_t huge = (hsize_t{1} << 28) - 1, one = 1, unlimited = H5S_UNLIMITED;
        const hid_t properties = chunked(huge);
        const hid_t space = H5Screate_simple(1, &one, &unlimited);
        H5Dclose(H5Dcreate2(table, "x", H5T_IEEE_F64LE, space, H5P_DEFAULT, properties, H5P_DEFAULT));
        H5Sclose(space);
        H5Pclose(properties);
    });
    refused("not one-dimensional",
            [&](hid_t, hid_t table) { put_column(table, "x", 10, H5P_DEFAULT, H5T_IEEE_F64LE, 2); });
    refused("of a type", [&](hid_t, hid_t table) { put_column(table, "x", 10, H5P_DEFAULT, H5T_STD_I64LE); });
    refused("differ in length", [&](hid_t, hid_t table) {
        put_column(table, "x", 10, H5P_DEFAULT);
        put_column(table, "y", 11, H5P_DEFAULT);
    });
    refused("studies",
            [&](hid_t, hid_t table) { H5Gclose(H5Gcreate2(table, "x", H5P_DEFAULT, H5P_DEFAULT, H5P_DEFAULT)); });
}

TEST_CASE("A code without a name is refused, not handed on", "[store]") {
    const Folder folder;
    const std::string why = made(folder / "a.h5", [](hid_t, hid_t table) {
        const hid_t type = H5Tenum_create(H5T_STD_U8LE);
        for (unsigned char code = 0; code < 2; ++code) H5Tenum_insert(type, code == 0 ? "no" : "yes", &code);
        const hsize_t size = 3;
        const hid_t space = H5Screate_simple(1, &size, nullptr);
        const hid_t dataset = H5Dcreate2(table, "x", type, space, H5P_DEFAULT, H5P_DEFAULT, H5P_DEFAULT);
        const unsigned char codes[] = {0, 1, 2};
        H5Dwrite(dataset, type, H5S_ALL, H5S_ALL, H5P_DEFAULT, codes);
        H5Dclose(dataset);
        H5Sclose(space);
        H5Tclose(type);
    });
    CHECK_THAT(why, Catch::Contains("the code 2, which has no name"));
}
