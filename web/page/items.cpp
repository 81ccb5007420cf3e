#include "web/page/items.h"

#include <imgui.h>
#include <imgui_internal.h>

#include <algorithm>
#include <nlohmann/json.hpp>

namespace lw::page {
namespace {

std::vector<Item> listed;

Item* find(ImGuiID id) {
  const auto at =
      std::find_if(listed.rbegin(), listed.rend(), [&](const Item& item) { return item.id == id; });
  return at == listed.rend() ? nullptr : &*at;
}

void added(ImGuiContext& context, ImGuiID id, const ImRect& box) {
  const ImGuiWindow* window = context.CurrentWindow;
  if (id == 0 || !window) return;
  ImRect seen = box;
  seen.ClipWith(window->ClipRect);
  if (seen.GetWidth() <= 0 || seen.GetHeight() <= 0) return;
  if (find(id)) return;
  listed.push_back({id, window->Name, {}, seen.Min.x, seen.Min.y, seen.GetWidth(), seen.GetHeight()});
}

void named(ImGuiID id, const char* label) {
  if (Item* item = find(id); item && label) item->label = label;
}

}  // namespace

void list_items(bool on) { ImGui::GetCurrentContext()->TestEngineHookItems = on; }

void clear_items() { listed.clear(); }

const std::vector<Item>& items() { return listed; }

std::string items_json() {
  nlohmann::json all = nlohmann::json::array();
  for (const Item& item : listed) {
    all.push_back({{"id", item.id},
                   {"window", item.window},
                   {"label", item.label},
                   {"x", item.x},
                   {"y", item.y},
                   {"width", item.width},
                   {"height", item.height}});
  }
  return all.dump(-1, ' ', false, nlohmann::json::error_handler_t::replace);
}

}  // namespace lw::page

// What Dear ImGui calls; the names are its own.
void ImGuiTestEngineHook_ItemAdd(ImGuiContext* context, ImGuiID id, const ImRect& box,
                                 const ImGuiLastItemData*) {
  lw::page::added(*context, id, box);
}
void ImGuiTestEngineHook_ItemInfo(ImGuiContext*, ImGuiID id, const char* label, ImGuiItemStatusFlags) {
  lw::page::named(id, label);
}
void ImGuiTestEngineHook_Log(ImGuiContext*, const char*, ...) {}
const char* ImGuiTestEngine_FindItemDebugLabel(ImGuiContext*, ImGuiID) { return nullptr; }
