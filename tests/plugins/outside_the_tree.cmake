# Installs the plugin kit of BUILD into an empty prefix, copies the template from there to an empty folder, builds it
# with nothing but that prefix, and has PROGRAM check it. SCRATCH is made anew.
function(run)
  execute_process(COMMAND ${ARGN} RESULT_VARIABLE status OUTPUT_VARIABLE output ERROR_VARIABLE output)
  if(NOT status EQUAL 0)
    message(FATAL_ERROR "${ARGN}\nended with ${status}:\n${output}")
  endif()
  message(STATUS "${output}")
endfunction()

set(prefix ${SCRATCH}/prefix)
set(copy ${SCRATCH}/my-bath)
file(REMOVE_RECURSE ${SCRATCH})
run(${CMAKE_COMMAND} --install ${BUILD} --component plugin-kit --prefix ${prefix})
file(COPY ${prefix}/share/bathwright/template/ DESTINATION ${copy})
run(${CMAKE_COMMAND} -S ${copy} -B ${copy}/build -G Ninja -D CMAKE_PREFIX_PATH=${prefix}
    "-D CMAKE_C_FLAGS=-Wall -Wextra -Wpedantic -Werror")
run(${CMAKE_COMMAND} --build ${copy}/build)
run(${PROGRAM} plugins check --run ${copy}/build/bath-types/my-bath.bathtype.so)
