// OpenGL's own functions are looked up, so that nothing more has to be linked.
#pragma once

#include <GLFW/glfw3.h>

namespace bathwright::desktop {

/// Of the context that is current; nullptr where it has none of that name.
template <class Function>
Function gl(const char* name) {
  return reinterpret_cast<Function>(glfwGetProcAddress(name));
}

}  // namespace bathwright::desktop
