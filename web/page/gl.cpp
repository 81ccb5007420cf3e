// Dear ImGui's backend for OpenGL ES 3, compiled with answers for the state that it asks back.
//
// The backend reads the GL state before each frame and restores it afterwards, for programs that draw
// otherwise as well. In a browser each such question waits for the graphics process: measured 12 to 26 ms a
// frame. Nothing but the backend draws here, so the state it would find is known: GL's own initial values,
// which it then restores.
#include <GLES3/gl3.h>

namespace {

void state_of_gl(GLenum name, GLint* values) {
  switch (name) {
    case GL_ACTIVE_TEXTURE:
      *values = GL_TEXTURE0;
      break;
    case GL_BLEND_EQUATION_RGB:
    case GL_BLEND_EQUATION_ALPHA:
      *values = GL_FUNC_ADD;
      break;
    case GL_BLEND_SRC_RGB:
    case GL_BLEND_SRC_ALPHA:
      *values = GL_ONE;
      break;
    case GL_VIEWPORT:
    case GL_SCISSOR_BOX:
      for (int i = 0; i < 4; ++i) values[i] = 0;
      break;
    case GL_BLEND_DST_RGB:
    case GL_BLEND_DST_ALPHA:
    case GL_CURRENT_PROGRAM:
    case GL_TEXTURE_BINDING_2D:
    case GL_SAMPLER_BINDING:
    case GL_ARRAY_BUFFER_BINDING:
    case GL_ELEMENT_ARRAY_BUFFER_BINDING:
    case GL_VERTEX_ARRAY_BINDING:
      *values = 0;
      break;
    default:
      glGetIntegerv(name, values);
  }
}

}  // namespace

#define glGetIntegerv state_of_gl
#include <imgui_impl_opengl3.cpp>
