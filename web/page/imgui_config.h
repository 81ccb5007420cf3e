// How Dear ImGui is compiled, natively for the tests and for the page alike.
#pragma once

#define IMGUI_DISABLE_OBSOLETE_FUNCTIONS
#define IMGUI_DISABLE_DEMO_WINDOWS
#define IMGUI_DISABLE_FILE_FUNCTIONS
#define IMGUI_DISABLE_DEFAULT_SHELL_FUNCTIONS

// Dear ImGui reports every item's rectangle and label when asked to (web/page/items.h): the tests find a
// widget by what is written on it. While nobody asks it costs one comparison an item.
#define IMGUI_ENABLE_TEST_ENGINE

// More than 65,536 vertices in one list: a long drive's path is drawn whole.
#define ImDrawIdx unsigned int
