/* Four functions that Dear ImGui's SDL backend names and never reaches here: of game controllers, and of
   SDL's own renderer. The parts of SDL that hold them are left out (web/build/parts.cmake). */
#include <SDL.h>

SDL_GameController* SDL_GameControllerOpen(int index) {
  (void)index;
  return 0;
}
Uint8 SDL_GameControllerGetButton(SDL_GameController* controller, SDL_GameControllerButton button) {
  (void)controller;
  (void)button;
  return 0;
}
Sint16 SDL_GameControllerGetAxis(SDL_GameController* controller, SDL_GameControllerAxis axis) {
  (void)controller;
  (void)axis;
  return 0;
}
int SDL_GetRendererOutputSize(SDL_Renderer* renderer, int* width, int* height) {
  (void)renderer;
  *width = *height = 0;
  return -1;
}
