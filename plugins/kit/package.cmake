# The CMake package `Bathwright`, install component plugin-kit: header, functions, template.
include(CMakePackageConfigHelpers)
file(STRINGS ${PROJECT_SOURCE_DIR}/plugins/include/bathwright_plugin.h versions REGEX "^#define BW_ABI_M")
string(REGEX REPLACE ".*BW_ABI_MAJOR ([0-9]+)u.*BW_ABI_MINOR ([0-9]+)u.*" "\\1.\\2" interface_version "${versions}")
write_basic_package_version_file(${CMAKE_CURRENT_BINARY_DIR}/BathwrightConfigVersion.cmake
  VERSION ${interface_version} COMPATIBILITY SameMajorVersion ARCH_INDEPENDENT)

set(package lib/cmake/Bathwright)
install(FILES ${PROJECT_SOURCE_DIR}/plugins/include/bathwright_plugin.h DESTINATION include COMPONENT plugin-kit)
install(TARGETS bathwright_plugin_abi EXPORT BathwrightTargets COMPONENT plugin-kit)
install(EXPORT BathwrightTargets NAMESPACE bathwright:: DESTINATION ${package} COMPONENT plugin-kit)
install(FILES kit/BathwrightConfig.cmake kit/bath_type_library.cmake kit/exports.map
              ${CMAKE_CURRENT_BINARY_DIR}/BathwrightConfigVersion.cmake
        DESTINATION ${package} COMPONENT plugin-kit)
install(DIRECTORY ${PROJECT_SOURCE_DIR}/plugins/template DESTINATION share/bathwright COMPONENT plugin-kit)
