#include "sim/store/attributes.h"

#include <vector>

namespace lacuna {

namespace {

constexpr std::size_t longest_text = 64u << 20;

std::string label(const char* name) { return std::string("attribute '") + name + "'"; }

Handle text_type() {
    Handle type = checked(H5Tcopy(H5T_C_S1), H5Tclose, "text type");
    check(H5Tset_size(type.id(), H5T_VARIABLE), "text type");
    check(H5Tset_cset(type.id(), H5T_CSET_UTF8), "text type");
    return type;
}

bool has(hid_t object, const char* name) {
    const htri_t there = H5Aexists(object, name);
    if (there < 0) throw RunError(label(name) + ": " + hdf5_reason());
    return there > 0;
}

bool is_scalar(hid_t attribute) {
    const Handle space = checked(H5Aget_space(attribute), H5Sclose, "attribute space");
    return H5Sget_simple_extent_npoints(space.id()) == 1;
}

}  // namespace

void write_text(hid_t object, const char* name, const std::string& text) {
    const Handle type = text_type();
    const Handle space = checked(H5Screate(H5S_SCALAR), H5Sclose, label(name));
    const Handle attribute =
        checked(H5Acreate2(object, name, type.id(), space.id(), H5P_DEFAULT, H5P_DEFAULT), H5Aclose, label(name));
    const char* value = text.c_str();
    check(H5Awrite(attribute.id(), type.id(), &value), label(name));
}

void write_integer(hid_t object, const char* name, std::int32_t value) {
    const Handle space = checked(H5Screate(H5S_SCALAR), H5Sclose, label(name));
    const Handle attribute = checked(H5Acreate2(object, name, H5T_STD_I32LE, space.id(), H5P_DEFAULT, H5P_DEFAULT),
                                     H5Aclose, label(name));
    check(H5Awrite(attribute.id(), H5T_NATIVE_INT32, &value), label(name));
}

std::string read_text(hid_t object, const char* name) {
    if (!has(object, name)) return {};
    const Handle attribute = checked(H5Aopen(object, name, H5P_DEFAULT), H5Aclose, label(name));
    const Handle type = checked(H5Aget_type(attribute.id()), H5Tclose, label(name));
    if (H5Tget_class(type.id()) != H5T_STRING || !is_scalar(attribute.id()))
        throw RunError(label(name) + " is not a text");
    if (H5Tis_variable_str(type.id()) > 0) {
        const Handle memory = text_type();
        check(H5Tset_cset(memory.id(), H5Tget_cset(type.id())), label(name));
        char* value = nullptr;
        check(H5Aread(attribute.id(), memory.id(), &value), label(name));
        const std::string text = value == nullptr ? "" : value;
        H5free_memory(value);
        return text;
    }
    const std::size_t size = H5Tget_size(type.id());
    if (size > longest_text) throw RunError(label(name) + " is too long");
    std::vector<char> buffer(size + 1, '\0');
    check(H5Aread(attribute.id(), type.id(), buffer.data()), label(name));
    return buffer.data();
}

std::int32_t read_integer(hid_t object, const char* name, std::int32_t otherwise) {
    if (!has(object, name)) return otherwise;
    const Handle attribute = checked(H5Aopen(object, name, H5P_DEFAULT), H5Aclose, label(name));
    const Handle type = checked(H5Aget_type(attribute.id()), H5Tclose, label(name));
    if (H5Tget_class(type.id()) != H5T_INTEGER || !is_scalar(attribute.id())) {
        throw RunError(label(name) + " is not an integer");
    }
    std::int32_t value = otherwise;
    check(H5Aread(attribute.id(), H5T_NATIVE_INT32, &value), label(name));
    return value;
}

}  // namespace lacuna
