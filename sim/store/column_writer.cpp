#include "sim/store/column_writer.h"

#include <algorithm>

#include "sim/store/attributes.h"

namespace lacuna {

namespace {

Handle enumeration(const std::vector<std::string>& labels, const std::string& path) {
    Handle type = checked(H5Tenum_create(H5T_STD_U8LE), H5Tclose, path);
    for (std::size_t i = 0; i < labels.size(); ++i) {
        const auto code = static_cast<unsigned char>(i);
        check(H5Tenum_insert(type.id(), labels[i].c_str(), &code), path + ": label '" + labels[i] + "'");
    }
    return type;
}

Handle file_type(const ColumnSpec& spec, const std::string& path) {
    switch (spec.type) {
        case ColumnType::u8:
            return spec.labels.empty() ? checked(H5Tcopy(H5T_STD_U8LE), H5Tclose, path)
                                       : enumeration(spec.labels, path);
        case ColumnType::i32:
            return checked(H5Tcopy(H5T_STD_I32LE), H5Tclose, path);
        case ColumnType::f64:
            return checked(H5Tcopy(H5T_IEEE_F64LE), H5Tclose, path);
    }
    throw Defect("file_type: unknown column type");
}

Handle creation_properties(const ColumnSpec& spec, hsize_t chunk, bool compress, const std::string& path) {
    Handle properties = checked(H5Pcreate(H5P_DATASET_CREATE), H5Pclose, path);
    check(H5Pset_obj_track_times(properties.id(), false), path);
    check(H5Pset_chunk(properties.id(), 1, &chunk), path);
    if (compress) {
        if (is_shuffled(spec.type)) check(H5Pset_shuffle(properties.id()), path);
        check(H5Pset_deflate(properties.id(), 1), path);
    }
    return properties;
}

}  // namespace

void ColumnWriter::create(hid_t file, std::size_t rows_in_chunk, bool grows) {
    const hsize_t none = 0;
    const hsize_t most = grows ? H5S_UNLIMITED : rows_in_chunk;
    const Handle space = checked(H5Screate_simple(1, &none, &most), H5Sclose, path_);
    const Handle type = file_type(spec_, path_);
    const Handle properties = creation_properties(spec_, rows_in_chunk, compress_, path_);
    dataset_ =
        checked(H5Dcreate2(file, path_.c_str(), type.id(), space.id(), H5P_DEFAULT, properties.id(), H5P_DEFAULT),
                H5Dclose, path_);
    write_text(dataset_.id(), "units", spec_.units);
    write_text(dataset_.id(), "description", spec_.description);
}

void ColumnWriter::write(const EncodedChunk& chunk, std::size_t count) {
    const hsize_t offset = rows_;
    rows_ += count;
    check(H5Dset_extent(dataset_.id(), &rows_), path_);
    check(
        H5Dwrite_chunk(dataset_.id(), H5P_DEFAULT, chunk.skipped, &offset, chunk.bytes.size(), chunk.bytes.data()),
        path_);
}

void ColumnWriter::cut(std::size_t rows) {
    rows_ = rows;
    check(H5Dset_extent(dataset_.id(), &rows_), path_);
}

}  // namespace lacuna
