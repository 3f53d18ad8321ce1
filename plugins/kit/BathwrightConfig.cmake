# find_package(Bathwright 1.0): what a bath type needs that is built outside the tree of Bathwright. The version is
# that of the plugin interface, not of the program.
#   bathwright::plugin_abi      the header bathwright_plugin.h
#   bathwright_bath_type(<id> SOURCES <sources>... [OUTPUT <folder>])
#                               <id>.bathtype.so and its papers in OUTPUT, or in bath-types of the build folder
include(${CMAKE_CURRENT_LIST_DIR}/BathwrightTargets.cmake)
include(${CMAKE_CURRENT_LIST_DIR}/bath_type_library.cmake)

function(bathwright_bath_type id)
  cmake_parse_arguments(B "" "OUTPUT" "SOURCES" ${ARGN})
  if(NOT B_OUTPUT)
    set(B_OUTPUT ${CMAKE_CURRENT_BINARY_DIR}/bath-types)
  endif()
  bathwright_bath_type_library(${id} ${B_OUTPUT} SOURCES ${B_SOURCES})
  bathwright_papers(${id} ${CMAKE_CURRENT_SOURCE_DIR} ${B_OUTPUT})
endfunction()
