# Installation, and the package that find_package(isotally) reads.
include(CMakePackageConfigHelpers)
set(package_dir ${CMAKE_INSTALL_LIBDIR}/cmake/isotally)

install(TARGETS isotally EXPORT isotally_targets FILE_SET HEADERS)
install(TARGETS isotally_program)
install(EXPORT isotally_targets NAMESPACE isotally:: DESTINATION ${package_dir})

configure_package_config_file(${CMAKE_CURRENT_LIST_DIR}/isotally-config.cmake.in
                              ${CMAKE_CURRENT_BINARY_DIR}/isotally-config.cmake
                              INSTALL_DESTINATION ${package_dir} NO_SET_AND_CHECK_MACRO)
write_basic_package_version_file(${CMAKE_CURRENT_BINARY_DIR}/isotally-config-version.cmake
                                 COMPATIBILITY SameMinorVersion)
install(FILES ${CMAKE_CURRENT_BINARY_DIR}/isotally-config.cmake
              ${CMAKE_CURRENT_BINARY_DIR}/isotally-config-version.cmake
              ${CMAKE_CURRENT_LIST_DIR}/FindRDKit.cmake
              ${CMAKE_CURRENT_LIST_DIR}/Findlibmd.cmake
        DESTINATION ${package_dir})
install(FILES ${PROJECT_SOURCE_DIR}/LICENSE DESTINATION ${CMAKE_INSTALL_DOCDIR})
