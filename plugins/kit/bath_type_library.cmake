# How a bath type is built, in the tree of Bathwright and outside it alike.

# bathwright_bath_type_library(<id> <folder> SOURCES ... [EXPORTS <version script>])
# <folder>/<id>.bathtype.so from C11 or C++ sources: one exported symbol (exports.map: hidden visibility alone leaves
# templates of the C++ library visible), none undefined, bound at once; never writable by others, whatever the umask.
function(bathwright_bath_type_library id folder)
  cmake_parse_arguments(B "" "EXPORTS" "SOURCES" ${ARGN})
  set(exports ${CMAKE_CURRENT_FUNCTION_LIST_DIR}/exports.map)
  if(B_EXPORTS)
    set(exports ${B_EXPORTS})
  endif()
  add_library(${id} MODULE ${B_SOURCES})
  target_link_libraries(${id} PRIVATE bathwright::plugin_abi m)
  target_link_options(${id} PRIVATE -Wl,-z,now -Wl,--version-script=${exports})
  set_property(TARGET ${id} APPEND PROPERTY LINK_DEPENDS ${exports})
  if(NOT BATHWRIGHT_SANITIZE)  # a sanitizer's run-time stands in the program that loads the plugin
    target_link_options(${id} PRIVATE -Wl,-z,defs)
  endif()
  set_target_properties(${id} PROPERTIES
    PREFIX "" SUFFIX ".bathtype.so" LIBRARY_OUTPUT_DIRECTORY ${folder}
    C_STANDARD 11 C_STANDARD_REQUIRED ON C_EXTENSIONS OFF
    C_VISIBILITY_PRESET hidden CXX_VISIBILITY_PRESET hidden VISIBILITY_INLINES_HIDDEN ON)
  add_custom_command(TARGET ${id} POST_BUILD COMMAND chmod go-w $<TARGET_FILE:${id}> ${folder} VERBATIM)
endfunction()

# bathwright_papers(<id> <source folder> <folder>)
# README.md and examples.toml, where there are any, go to <folder>/<id>/ with the target <id>: `bathwright plugins
# check` looks for them there.
function(bathwright_papers id source folder)
  set(copies "")
  foreach(paper README.md examples.toml)
    set(to ${folder}/${id}/${paper})
    if(EXISTS ${source}/${paper})
      add_custom_command(OUTPUT ${to} COMMAND ${CMAKE_COMMAND} -E copy ${source}/${paper} ${to}
        DEPENDS ${source}/${paper} VERBATIM)
      list(APPEND copies ${to})
    endif()
  endforeach()
  if(copies)
    add_custom_target(${id}-papers DEPENDS ${copies})
    add_dependencies(${id} ${id}-papers)
  endif()
endfunction()
