#include "engine/scenario/link.h"

#include "engine/scenario/text.h"
#include "shell/commands.h"

namespace lw::shell {

Answer link_command(const LinkCall& call) {
  const auto loaded = load(call.input);
  if (!loaded) return refused(loaded.error());
  const auto fragment = encode_link(loaded->scenario);
  if (!fragment) return refused(fragment.error());
  const bool has_hash = !call.page.empty() && call.page.back() == '#';
  const std::string link = call.page + (has_hash ? "" : "#") + *fragment;
  const std::string text = write(loaded->scenario);
  Answer answer;
  answer.json["link"] = link;
  answer.json["text"] = text;
  answer.text = loaded->was_link ? text : link + '\n';
  return answer;
}

}  // namespace lw::shell
