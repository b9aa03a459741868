# Compiler settings shared by all targets, and helpers that declare modules and tests.

add_library(halostep_flags INTERFACE)
# No FMA contraction: the fit must come out the same on every machine.
target_compile_options(halostep_flags INTERFACE -ffp-contract=off -Wall -Wextra -Wconversion -Wshadow)
if(HALOSTEP_WERROR)
  target_compile_options(halostep_flags INTERFACE -Werror)
endif()
if(HALOSTEP_SANITIZE)
  target_compile_options(halostep_flags INTERFACE -fsanitize=${HALOSTEP_SANITIZE} -fno-omit-frame-pointer)
  target_link_options(halostep_flags INTERFACE -fsanitize=${HALOSTEP_SANITIZE})
endif()

# halostep_module(NAME SOURCES a.cpp ... LIBRARIES lib ...)
# An OBJECT library halostep_NAME. A module without sources is skipped. Libraries used inside one
# module only stay PRIVATE to it, so that no other module can include them by accident.
function(halostep_module name)
  cmake_parse_arguments(arg "" "" "SOURCES;LIBRARIES" ${ARGN})
  if(NOT arg_SOURCES)
    return()
  endif()
  add_library(halostep_${name} OBJECT ${arg_SOURCES})
  target_include_directories(halostep_${name} PUBLIC ${PROJECT_SOURCE_DIR}/lib/include PRIVATE ${PROJECT_SOURCE_DIR}/lib)
  target_link_libraries(halostep_${name} PRIVATE halostep_flags fmt::fmt ${arg_LIBRARIES})
  set_property(GLOBAL APPEND PROPERTY HALOSTEP_MODULES halostep_${name})
endfunction()

# halostep_add_objects(TARGET): all module objects and the libraries they need at link time.
function(halostep_add_objects target)
  get_property(modules GLOBAL PROPERTY HALOSTEP_MODULES)
  foreach(module IN LISTS modules)
    target_sources(${target} PRIVATE $<TARGET_OBJECTS:${module}>)
  endforeach()
  target_link_libraries(${target} PRIVATE halostep_flags openbabel SQLiteCpp PkgConfig::nettle fmt::fmt)
endfunction()

# halostep_test(NAME LABEL label SOURCES a.cpp ... LIBRARIES lib ...)
# One GoogleTest executable; every test in it becomes a ctest test with the label.
function(halostep_test name)
  cmake_parse_arguments(arg "" "LABEL" "SOURCES;LIBRARIES" ${ARGN})
  if(NOT arg_SOURCES)
    return()
  endif()
  add_executable(${name} ${arg_SOURCES})
  target_include_directories(${name} PRIVATE ${PROJECT_SOURCE_DIR}/lib ${PROJECT_SOURCE_DIR}/tools)
  target_compile_definitions(${name} PRIVATE HALOSTEP_SOURCE_DIR="${PROJECT_SOURCE_DIR}")
  target_link_libraries(${name} PRIVATE halostep_flags halostep::halostep fmt::fmt GTest::gmock GTest::gtest_main
                        ${arg_LIBRARIES})
  gtest_discover_tests(${name} TEST_PREFIX "${arg_LABEL}/" PROPERTIES LABELS ${arg_LABEL} DISCOVERY_TIMEOUT 60)
endfunction()
