# Packs tables/ at build time and puts the pack between the symbols isotally_tables_pack_begin and _end.
set(ISOTALLY_CMAKE_DIR ${CMAKE_CURRENT_LIST_DIR})

function(isotally_embed_tables target)
  set(tables_dir ${PROJECT_SOURCE_DIR}/tables)
  set(pack ${CMAKE_CURRENT_BINARY_DIR}/tables.pack)
  file(GLOB table_files CONFIGURE_DEPENDS ${tables_dir}/*)
  add_custom_command(OUTPUT ${pack}
                     COMMAND isotally_pack ${tables_dir} ${pack}
                     DEPENDS isotally_pack ${table_files}
                     COMMENT "Packing tables" VERBATIM)
  set(assembly ${CMAKE_CURRENT_BINARY_DIR}/tables_pack.s)
  configure_file(${ISOTALLY_CMAKE_DIR}/tables_pack.s.in ${assembly} @ONLY)
  set_source_files_properties(${assembly} PROPERTIES OBJECT_DEPENDS ${pack})
  target_sources(${target} PRIVATE ${assembly} ${pack})
endfunction()
