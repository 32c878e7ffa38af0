# How every target of this project is compiled.

find_program(ISOTALLY_CCACHE ccache)
mark_as_advanced(ISOTALLY_CCACHE)
if(PROJECT_IS_TOP_LEVEL AND ISOTALLY_CCACHE AND NOT CMAKE_CXX_COMPILER_LAUNCHER)
  set(CMAKE_CXX_COMPILER_LAUNCHER ${ISOTALLY_CCACHE})
endif()

if(ISOTALLY_TIDY)
  find_program(ISOTALLY_CLANG_TIDY clang-tidy REQUIRED)
  find_program(ISOTALLY_CLANG_FORMAT clang-format REQUIRED)
  file(GLOB_RECURSE formatted CONFIGURE_DEPENDS
       ${PROJECT_SOURCE_DIR}/include/*.hpp ${PROJECT_SOURCE_DIR}/src/*.[ch]pp ${PROJECT_SOURCE_DIR}/tests/*.[ch]pp)
  add_custom_target(isotally_format_check ALL
                    COMMAND ${ISOTALLY_CLANG_FORMAT} --dry-run --Werror ${formatted} VERBATIM)
  add_custom_target(isotally_format COMMAND ${ISOTALLY_CLANG_FORMAT} -i ${formatted} VERBATIM)
endif()

function(isotally_sanitize target)
  if(ISOTALLY_SANITIZE)
    set(flags -fsanitize=address,undefined -fno-sanitize-recover=all -fno-omit-frame-pointer
              $<$<BOOL:${ISOTALLY_FUZZ}>:-fsanitize=fuzzer-no-link>)
    target_compile_options(${target} PRIVATE $<$<COMPILE_LANGUAGE:CXX>:${flags}>)
    target_link_options(${target} PRIVATE ${flags})
  endif()
endfunction()

# Warnings and whatever else holds for all targets, tests included.
function(isotally_warnings target)
  target_compile_features(${target} PRIVATE cxx_std_20)
  # -ffp-contract=off: figures must not depend on whether the processor has fused multiply-add.
  # -Wno-maybe-uninitialized: g++ 12 reports <regex> falsely under the sanitizers (its bug 105562).
  # -Wno-restrict: g++ 12 reports std::string operator+ falsely (its bug 105651).
  set(flags -Wall -Wextra -Wpedantic -Wconversion -Wshadow -ffp-contract=off
            $<$<BOOL:${ISOTALLY_WERROR}>:-Werror> $<$<CXX_COMPILER_ID:GNU>:-Wno-restrict>
            $<$<AND:$<CXX_COMPILER_ID:GNU>,$<BOOL:${ISOTALLY_SANITIZE}>>:-Wno-maybe-uninitialized>)
  target_compile_options(${target} PRIVATE "$<$<COMPILE_LANGUAGE:CXX>:${flags}>")
  set_target_properties(${target} PROPERTIES CXX_EXTENSIONS OFF)
  isotally_sanitize(${target})
endfunction()

function(isotally_settings target)
  isotally_warnings(${target})
  set_target_properties(${target} PROPERTIES POSITION_INDEPENDENT_CODE ON)
  if(ISOTALLY_TIDY)
    set_target_properties(${target} PROPERTIES CXX_CLANG_TIDY "${ISOTALLY_CLANG_TIDY};--quiet")
  endif()
endfunction()
