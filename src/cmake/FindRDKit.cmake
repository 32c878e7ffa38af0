# RDKit as packaged by Debian, which brings neither a CMake configuration nor a .pc file.
# Components are library names without "RDKit" in front; each becomes the target RDKit::<component>.
# The headers need those of Boost, which must have been found before.
find_path(RDKit_INCLUDE_DIR NAMES GraphMol/RDKitBase.h PATH_SUFFIXES rdkit)
mark_as_advanced(RDKit_INCLUDE_DIR)

foreach(component IN LISTS RDKit_FIND_COMPONENTS)
  find_library(RDKit_${component}_LIBRARY NAMES RDKit${component})
  mark_as_advanced(RDKit_${component}_LIBRARY)
  if(RDKit_${component}_LIBRARY)
    set(RDKit_${component}_FOUND TRUE)
  endif()
endforeach()

include(FindPackageHandleStandardArgs)
find_package_handle_standard_args(RDKit REQUIRED_VARS RDKit_INCLUDE_DIR HANDLE_COMPONENTS)

if(RDKit_FOUND)
  foreach(component IN LISTS RDKit_FIND_COMPONENTS)
    if(NOT TARGET RDKit::${component})
      add_library(RDKit::${component} UNKNOWN IMPORTED)
      set_target_properties(RDKit::${component} PROPERTIES
        IMPORTED_LOCATION ${RDKit_${component}_LIBRARY}
        INTERFACE_INCLUDE_DIRECTORIES ${RDKit_INCLUDE_DIR}
        INTERFACE_LINK_LIBRARIES Boost::headers)
    endif()
  endforeach()
endif()
