# What the library is made of. Headers only leave no trace in the installed package; libraries do.
find_package(Eigen3 3.4 REQUIRED NO_MODULE)
find_package(Boost 1.74 REQUIRED CONFIG)
find_package(nlohmann_json 3.11 REQUIRED)
find_package(cereal 1.3 REQUIRED)
find_package(fmt 9 REQUIRED)
find_package(CLI11 2.1 REQUIRED)
find_package(libmd REQUIRED)
set(ISOTALLY_RDKIT_COMPONENTS FileParsers SmilesParse SubstructMatch GraphMol DataStructs RDGeometryLib RDGeneral)
find_package(RDKit REQUIRED COMPONENTS ${ISOTALLY_RDKIT_COMPONENTS})

set(ISOTALLY_HEADER_LIBRARIES Eigen3::Eigen Boost::headers nlohmann_json::nlohmann_json cereal::cereal)
list(TRANSFORM ISOTALLY_RDKIT_COMPONENTS PREPEND RDKit:: OUTPUT_VARIABLE ISOTALLY_LIBRARIES)
list(APPEND ISOTALLY_LIBRARIES fmt::fmt libmd::libmd)

# Libraries that no symbol is taken from are not loaded: each one costs time at every start.
add_link_options(LINKER:--as-needed)
