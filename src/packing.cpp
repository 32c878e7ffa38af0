#include "packing.hpp"

#include <cereal/archives/binary.hpp>
#include <cereal/types/array.hpp>
#include <cereal/types/map.hpp>
#include <cereal/types/optional.hpp>
#include <cereal/types/string.hpp>
#include <cereal/types/unordered_map.hpp>
#include <cereal/types/utility.hpp>
#include <cereal/types/vector.hpp>
#include <cstring>
#include <istream>
#include <sstream>
#include <streambuf>

namespace isotally {

template <class Archive>
void serialize(Archive& ar, Provenance& x) {
    ar(x.source, x.locator, x.status, x.confidence, x.note, x.line);
}
template <class Archive>
void serialize(Archive& ar, Figure& x) {
    ar(x.value, x.sd, x.from);
}
template <class Archive>
void serialize(Archive& ar, Substituent& x) {
    ar(x.id, x.name, x.smiles, x.smarts, x.rank, x.like, x.kind, x.prefix, x.principal, x.constants, x.line);
}
template <class Archive>
void serialize(Archive& ar, Constant& x) {
    ar(x.substituent, x.quantity, x.figure, x.use);
}
template <class Archive>
void serialize(Archive& ar, Reaction& x) {
    ar(x.id, x.family, x.name, x.conditions, x.new_group, x.has_acid, x.note, x.instead, x.figures);
}
template <class Archive>
void serialize(Archive& ar, State& x) {
    ar(x.reactions, x.group, x.state, x.acid_from, x.acid_to, x.both_forms, x.from);
}
template <class Archive>
void serialize(Archive& ar, Ban& x) {
    ar(x.id, x.reactions, x.smarts, x.unless, x.reason, x.instead, x.from);
}
template <class Archive>
void serialize(Archive& ar, Caution& x) {
    ar(x.code, x.reactions, x.substrate_smarts, x.product_smarts, x.severity, x.text, x.from);
}
template <class Archive>
void serialize(Archive& ar, ProductShare& x) {
    ar(x.smiles, x.percent, x.sd);
}
template <class Archive>
void serialize(Archive& ar, Measurement& x) {
    ar(x.id, x.reaction, x.substrate, x.method, x.basis, x.control, x.temperature_C, x.acid_percent,
       x.products, x.complete, x.use, x.use_reason, x.from);
}
template <class Archive>
void serialize(Archive& ar, RateFigure& x) {
    ar(x.id, x.reaction, x.substrate, x.relation, x.temperature_C, x.acid_percent, x.value, x.sd_log10, x.use,
       x.use_reason, x.from);
}
template <class Archive>
void serialize(Archive& ar, Name& x) {
    ar(x.name, x.smiles, x.preferred, x.from);
}
template <class Archive>
void serialize(Archive& ar, Source& x) {
    ar(x.id, x.citation, x.json);
}
template <class Archive>
void serialize(Archive& ar, ModelFigure& x) {
    ar(x.family, x.quantity, x.figure);
}
template <class Archive>
void serialize(Archive& ar, Tables& x) {
    ar(x.version, x.digest, x.substituents, x.constants, x.reactions, x.model, x.states, x.bans, x.cautions,
       x.measurements, x.rates, x.names, x.sources);
}
template <class Archive>
void serialize(Archive& ar, TableFile& x) {
    ar(x.name, x.text);
}
template <class Archive>
void serialize(Archive& ar, Conditions& x) {
    ar(x.reaction, x.temperature_C, x.acid_percent);
}
template <class Archive>
void serialize(Archive& ar, PlacedSite& x) {
    ar(x.groups, x.position, x.multiplicity, x.tag);
}
template <class Archive>
void serialize(Archive& ar, ObservedRow& x) {
    ar(x.weights, x.value, x.noise_sd, x.kind, x.limit, x.softness);
}
template <class Archive>
void serialize(Archive& ar, Observation& x) {
    ar(x.id, x.compound, x.source, x.status, x.confidence, x.conditions, x.sites, x.rows, x.shared_sd,
       x.kind);
}
template <class Archive>
void serialize(Archive& ar, GroupState& x) {
    ar(x.reaction, x.group, x.state, x.acid_from, x.acid_to, x.both_forms);
}
template <class Archive>
void serialize(Archive& ar, GroupIndex& x) {
    ar(x.exact, x.generic);
}
template <class Archive>
void serialize(Archive& ar, Knowledge& x) {
    ar(x.tables, x.groups, x.states, x.observations);
}

namespace {

template <class T>
std::string to_bytes(const T& value) {
    std::ostringstream out;
    cereal::BinaryOutputArchive archive(out);
    archive(value);
    return std::move(out).str();
}

/// A stream over bytes that stay where they are.
class ByteStream : std::streambuf, public std::istream {
public:
    explicit ByteStream(std::string_view bytes) : std::istream(this) {
        char* begin = const_cast<char*>(bytes.data());  // never written to: only the get area is set
        setg(begin, begin, begin + bytes.size());
    }
};

template <class T>
T from_bytes(std::string_view bytes) {
    T value;
    ByteStream in(bytes);
    cereal::BinaryInputArchive archive(in);
    archive(value);
    return value;
}

std::uint64_t first_part(std::string_view packed) {
    std::uint64_t size = 0;
    std::memcpy(&size, packed.data(), sizeof size);
    return size;
}

}  // namespace

std::string pack(const Knowledge& knowledge, const std::vector<TableFile>& files) {
    const std::string first = to_bytes(knowledge), second = to_bytes(files);
    const std::uint64_t size = first.size();
    std::string packed(sizeof size, '\0');
    std::memcpy(packed.data(), &size, sizeof size);
    return packed + first + second;
}

Knowledge unpack_knowledge(std::string_view packed) {
    return from_bytes<Knowledge>(packed.substr(sizeof(std::uint64_t), first_part(packed)));
}

std::vector<TableFile> unpack_files(std::string_view packed) {
    return from_bytes<std::vector<TableFile>>(packed.substr(sizeof(std::uint64_t) + first_part(packed)));
}

}  // namespace isotally
