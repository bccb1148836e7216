#include "sim/store/column_reader.h"

#include <fmt/format.h>

#include <algorithm>

#include "sim/store/attributes.h"

namespace lacuna {

namespace {

/// Deflate packs at most 1032 bytes into one (RFC 1951: a match of 258 bytes in two bits).
constexpr std::uint64_t most_bytes_from_one = 1100;
constexpr int most_labels = 256;
constexpr std::uint64_t largest_chunk = 64u << 20;  // bytes; HDF5 takes memory for a whole chunk at once

/// Column type of an integer or float type as it stands in the file.
ColumnType plain_type(hid_t type, const std::string& path) {
    const H5T_class_t kind = H5Tget_class(type);
    const std::size_t size = H5Tget_size(type);
    if (kind == H5T_INTEGER && size == 1) return ColumnType::u8;
    if (kind == H5T_INTEGER && size == 4) return ColumnType::i32;
    if (kind == H5T_FLOAT && size == 8) return ColumnType::f64;
    throw RunError(path + ": is of a type that outcome files do not use");
}

std::vector<std::string> labels_of(hid_t type, const std::string& path) {
    const int count = H5Tget_nmembers(type);
    if (count < 0 || count > most_labels || H5Tget_size(type) != 1)
        throw RunError(path + ": is an enumeration of another kind");
    std::vector<std::string> labels(static_cast<std::size_t>(count));
    for (int i = 0; i < count; ++i) {
        unsigned char code = 0;
        check(H5Tget_member_value(type, static_cast<unsigned>(i), &code), path);
        char* name = H5Tget_member_name(type, static_cast<unsigned>(i));
        if (name == nullptr || code >= labels.size()) {
            H5free_memory(name);
            throw RunError(path + ": its codes do not run from 0");
        }
        labels[code] = name;
        H5free_memory(name);
    }
    return labels;
}

void check_chunk(hid_t properties, std::size_t value_bytes, const std::string& path) {
    hsize_t rows[H5S_MAX_RANK] = {};
    if (H5Pget_chunk(properties, H5S_MAX_RANK, rows) != 1) throw RunError(path + ": is not one-dimensional");
    if (rows[0] > largest_chunk / value_bytes)
        throw RunError(fmt::format("{}: is stored in pieces of {} rows, which are too large", path, rows[0]));
}

void check_storage(hid_t dataset, std::size_t value_bytes, const std::string& path) {
    const Handle properties = checked(H5Dget_create_plist(dataset), H5Pclose, path);
    const H5D_layout_t layout = H5Pget_layout(properties.id());
    if (layout != H5D_CHUNKED && layout != H5D_CONTIGUOUS && layout != H5D_COMPACT) {
        throw RunError(path + ": is stored in a way that outcome files do not use");
    }
    if (layout == H5D_CHUNKED) check_chunk(properties.id(), value_bytes, path);
    if (H5Pget_external_count(properties.id()) != 0)
        throw RunError(path + ": keeps its values in another file, which is not read");
    for (int i = 0; i < H5Pget_nfilters(properties.id()); ++i) {
        unsigned flags = 0, config = 0;
        std::size_t values = 0;
        const H5Z_filter_t filter = H5Pget_filter2(properties.id(), static_cast<unsigned>(i), &flags, &values,
                                                   nullptr, 0, nullptr, &config);
        if (filter != H5Z_FILTER_SHUFFLE && filter != H5Z_FILTER_DEFLATE && filter != H5Z_FILTER_FLETCHER32) {
            throw RunError(path + ": is compressed in a way that outcome files do not use");
        }
    }
}

std::size_t rows_of(hid_t dataset, std::size_t value_bytes, std::uint64_t file_bytes, const std::string& path) {
    const Handle space = checked(H5Dget_space(dataset), H5Sclose, path);
    if (H5Sget_simple_extent_ndims(space.id()) != 1) throw RunError(path + ": is not one-dimensional");
    hsize_t rows = 0;
    check(H5Sget_simple_extent_dims(space.id(), &rows, nullptr), path);
    if (rows > file_bytes * most_bytes_from_one / value_bytes) {
        throw RunError(fmt::format("{}: says it has {} rows, more than the file can hold", path, rows));
    }
    if (rows > 0 && H5Dget_storage_size(dataset) == 0)
        throw RunError(path + ": says it has rows, but nothing is stored");
    return rows;
}

/// Codes have names, so that whoever looks a name up finds one.
void check_codes(const ColumnData& data, std::size_t labels, const std::string& name) {
    const auto* codes = std::get_if<std::vector<std::uint8_t>>(&data);
    if (codes == nullptr || labels == 0 || codes->empty()) return;
    const std::uint8_t largest = *std::max_element(codes->begin(), codes->end());
    if (largest >= labels) throw RunError(fmt::format("{}: holds the code {}, which has no name", name, largest));
}

hid_t memory_type(ColumnType type, hid_t file_type) {
    switch (type) {
        case ColumnType::u8:
            return H5Tget_class(file_type) == H5T_ENUM ? file_type : H5T_NATIVE_UINT8;
        case ColumnType::i32:
            return H5T_NATIVE_INT32;
        case ColumnType::f64:
            return H5T_NATIVE_DOUBLE;
    }
    throw Defect("memory_type: unknown column type");
}

}  // namespace

ColumnReader open_column(hid_t file, const std::string& path, const std::string& name, std::uint64_t file_bytes) {
    ColumnReader column{checked(H5Dopen2(file, path.c_str(), H5P_DEFAULT), H5Dclose, path), {}, 0};
    const Handle type = checked(H5Dget_type(column.dataset.id()), H5Tclose, path);
    column.spec.name = name;
    if (H5Tget_class(type.id()) == H5T_ENUM) {
        column.spec.type = ColumnType::u8;
        column.spec.labels = labels_of(type.id(), path);
    } else {
        column.spec.type = plain_type(type.id(), path);
    }
    check_storage(column.dataset.id(), H5Tget_size(type.id()), path);
    column.spec.units = read_text(column.dataset.id(), "units");
    column.spec.description = read_text(column.dataset.id(), "description");
    column.rows = rows_of(column.dataset.id(), H5Tget_size(type.id()), file_bytes, path);
    return column;
}

ColumnData read_rows(const ColumnReader& column, std::size_t first, std::size_t count) {
    const std::string& name = column.spec.name;
    if (first > column.rows || count > column.rows - first) throw Defect("read_rows: beyond the end of " + name);
    ColumnData data;
    if (column.spec.type == ColumnType::u8) data = std::vector<std::uint8_t>(count);
    if (column.spec.type == ColumnType::i32) data = std::vector<std::int32_t>(count);
    if (column.spec.type == ColumnType::f64) data = std::vector<double>(count);
    if (count == 0) return data;
    const hsize_t start = first, size = count;
    const Handle from = checked(H5Dget_space(column.dataset.id()), H5Sclose, name);
    check(H5Sselect_hyperslab(from.id(), H5S_SELECT_SET, &start, nullptr, &size, nullptr), name);
    const Handle to = checked(H5Screate_simple(1, &size, nullptr), H5Sclose, name);
    const Handle type = checked(H5Dget_type(column.dataset.id()), H5Tclose, name);
    std::visit(
        [&](auto& values) {
            check(H5Dread(column.dataset.id(), memory_type(column.spec.type, type.id()), to.id(), from.id(),
                          H5P_DEFAULT, values.data()),
                  "cannot read column " + name);
        },
        data);
    check_codes(data, column.spec.labels.size(), name);
    return data;
}

}  // namespace lacuna
