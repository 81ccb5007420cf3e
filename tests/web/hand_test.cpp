// The hand itself, and the parts of the page's shell that need no browser.
#include <imgui.h>

#include "tests/catch.h"
#include "tests/web/hand.h"
#include "web/page/typeface.h"

using lw::Hand;

TEST_CASE("the hand presses a button once for each click") {
  int pressed = 0;
  Hand hand([&] { pressed += ImGui::Button("Measure##again") ? 1 : 0; });
  hand.click("Measure");
  hand.click("Measure##again");
  CHECK(pressed == 2);
}

TEST_CASE("the hand names what is there when a widget is not") {
  Hand hand([] { ImGui::Button("Measure"); });
  CHECK_THROWS_WITH(hand.find("Weigh"),
                    Catch::Matchers::Contains("Weigh") && Catch::Matchers::Contains("Measure"));
}

TEST_CASE("the hand types into fields and sliders") {
  char name[32] = "before";
  float gain = 0;
  Hand hand([&] {
    ImGui::InputText("Name", name, sizeof name);
    ImGui::SliderFloat("Gain", &gain, 0, 1);
  });
  hand.type("Name", "harbour tram \xC3\xA4");
  CHECK(std::string(name) == "harbour tram \xC3\xA4");
  hand.type("Gain", "0.25", true);
  CHECK(gain == 0.25f);
}

TEST_CASE("the hand drags a slider to the right end") {
  float gain = 0;
  Hand hand([&] { ImGui::SliderFloat("Gain", &gain, 0, 1); });
  hand.drag("Gain", 600, 0);
  CHECK(gain == 1);
}

TEST_CASE("widgets that cannot be seen are not listed") {
  Hand hand([] {
    ImGui::BeginChild("short", {200, 40});
    ImGui::Button("above");
    ImGui::SetCursorPosY(500);
    ImGui::Button("below");
    ImGui::EndChild();
  });
  CHECK(hand.has("above"));
  CHECK_FALSE(hand.has("below"));
}

TEST_CASE("every digit has the same width, in every font, at every pixel ratio") {
  Hand hand([] {});
  for (float ratio : {1.0f, 1.25f, 2.0f, 3.0f}) {
    lw::page::load_typeface(ratio);
    const lw::page::Typeface& face = lw::page::typeface();
    for (const ImFont* font : {face.text, face.small, face.strong, face.headline}) {
      for (ImWchar digit = '1'; digit <= '9'; ++digit) {
        CHECK(font->GetCharAdvance(digit) == font->GetCharAdvance('0'));
      }
    }
  }
}

TEST_CASE("the typeface holds every character that the page writes") {
  Hand hand([] {});
  const ImWchar written[] = {0x2190, 0x2192, 0x2191, 0x2193, 0xB7,   0xB0,   0xB1,  0xD7,  0x2264,
                             0x2265, 0x2212, 0x2013, 0x2026, 0xB2,   0xB5,   0x3C4, 0x3C9, 0x394,
                             0x25B2, 0x25BC, 0x25CF, 0x25CB, 0x25A0, 0x25A1, 0x221A};
  const lw::page::Typeface& face = lw::page::typeface();
  for (const ImFont* font : {face.text, face.small, face.strong, face.headline}) {
    for (const ImWchar character : written) {
      INFO("U+" << std::hex << character);
      CHECK(font->FindGlyphNoFallback(character) != nullptr);
    }
  }
}
