# Compiler flags live on one target that our own targets link privately; nobody who consumes us inherits them.
# -Wrestrict is off for g++: version 12 reports an overlap in std::string::insert that is not there (GCC bug 105651).
add_library(bathwright_options INTERFACE)
target_compile_options(bathwright_options INTERFACE
  -Wall -Wextra -Wpedantic -Wshadow $<$<COMPILE_LANGUAGE:CXX>:-Wconversion;-Wno-sign-conversion>
  $<$<COMPILE_LANG_AND_ID:CXX,GNU>:-Wno-restrict>
  $<$<BOOL:${BATHWRIGHT_WERROR}>:-Werror>)
if(BATHWRIGHT_SANITIZE)
  target_compile_options(bathwright_options INTERFACE -fsanitize=${BATHWRIGHT_SANITIZE} -fno-omit-frame-pointer -fno-sanitize-recover=all)
  target_link_options(bathwright_options INTERFACE -fsanitize=${BATHWRIGHT_SANITIZE})
endif()
if(BATHWRIGHT_FUZZ)  # every part tells the fuzzer which of its branches an input reached
  target_compile_options(bathwright_options INTERFACE -fsanitize=fuzzer-no-link)
endif()

# bathwright_part(<name> SOURCES ... [USES <other parts>] [PRIVATE <libraries>])
# One part of the engine: a static library bathwright::<name> whose public headers stand in
# engine/<name>/include. USES states the arrows; a part sees only the headers of what it uses.
function(bathwright_part name)
  cmake_parse_arguments(PART "" "" "SOURCES;USES;PRIVATE" ${ARGN})
  add_library(bathwright_${name} STATIC ${PART_SOURCES})
  add_library(bathwright::${name} ALIAS bathwright_${name})
  target_include_directories(bathwright_${name} PUBLIC ${CMAKE_CURRENT_SOURCE_DIR}/include)
  list(TRANSFORM PART_USES PREPEND bathwright::)
  target_link_libraries(bathwright_${name} PUBLIC ${PART_USES} PRIVATE bathwright_options ${PART_PRIVATE})
endfunction()
