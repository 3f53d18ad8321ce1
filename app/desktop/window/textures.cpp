#include "textures.hpp"

#include <cstdint>

#include "gl_function.hpp"

namespace bathwright::desktop {
namespace {

unsigned uploaded(const sheets::Picture& picture) {
  static const auto generate = gl<void (*)(GLsizei, GLuint*)>("glGenTextures");
  static const auto bind = gl<void (*)(GLenum, GLuint)>("glBindTexture");
  static const auto set = gl<void (*)(GLenum, GLenum, GLint)>("glTexParameteri");
  static const auto fill =
      gl<void (*)(GLenum, GLint, GLint, GLsizei, GLsizei, GLint, GLenum, GLenum, const void*)>(
          "glTexImage2D");
  GLuint name = 0;
  generate(1, &name);
  bind(GL_TEXTURE_2D, name);
  set(GL_TEXTURE_2D, GL_TEXTURE_MIN_FILTER, GL_LINEAR);
  set(GL_TEXTURE_2D, GL_TEXTURE_MAG_FILTER, GL_LINEAR);
  fill(GL_TEXTURE_2D, 0, GL_RGBA, picture.width, picture.height, 0, GL_RGBA, GL_UNSIGNED_BYTE,
       picture.rgba.data());
  return name;
}

void remove(unsigned name) {
  static const auto remove_textures = gl<void (*)(GLsizei, const GLuint*)>("glDeleteTextures");
  remove_textures(1, &name);
}

}  // namespace

Textures::~Textures() {
  for (const auto& [picture, held] : held_) remove(held.name);
}

ImTextureID Textures::of(const std::shared_ptr<const sheets::Picture>& picture) {
  Held& held = held_[picture.get()];
  if (!held.picture) held = {picture, uploaded(*picture), true};
  held.used = true;
  return reinterpret_cast<ImTextureID>(static_cast<std::intptr_t>(held.name));
}

void Textures::forget_unused() {
  std::erase_if(held_, [](const auto& one) {
    if (one.second.used) return false;
    remove(one.second.name);
    return true;
  });
  for (auto& [picture, held] : held_) held.used = false;
}

}  // namespace bathwright::desktop
