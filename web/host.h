// What the application asks of the place it runs in. Two implementations: web/page/host_browser.cpp in the
// page, and web/page/host_null.cpp in the native tests, which only writes down what was asked (host_null.h).
//
// None of these fails loudly: a browser may refuse to store (private windows, full disk), to reach the
// clipboard or to save, and the page has to go on. Where the answer matters it is returned.
#pragma once

#include <string>
#include <string_view>

namespace lw::host {

/// Lets the user keep `bytes` as a file; `name` is the suggested name, `type` a media type such as
/// "text/csv".
void save_file(std::string_view name, std::string_view bytes, std::string_view type);

/// Lets the user choose a file; it arrives by app::file_opened(), or never. `accept` as in HTML
/// (".toml,.csv"). Call it in the frame in which the button was released: browsers open the dialog only right
/// after an input.
void choose_file(std::string_view accept);

/// Puts text on the clipboard. Within a frame caused by an input, for the same reason.
void copy_text(std::string_view text);

/// Keeps `text` under `key` in this browser, across closing the tab. False when the browser will not.
bool store(std::string_view key, std::string_view text);

/// What store() kept under `key`; empty when there is nothing, or the browser will not tell.
std::string stored(std::string_view key);

/// The address of this page without # and what follows: what a link to it starts with.
std::string address();

/// Puts `fragment` behind # in the address, in place (the back button does not go through every edit).
void set_fragment(std::string_view fragment);

/// Seconds since some fixed moment, never going back; of microsecond to millisecond resolution.
double seconds();

/// Hands `request` to a worker of its own, where worker_app.h answers it piece by piece beside the page.
/// `job` is the caller's number for it, unused so far. Messages arrive by app::job_message().
void start_job(int job, std::string_view request);

/// Ends a job at once, wherever it is; no message of it arrives after this. Unknown numbers are ignored.
void cancel_job(int job);

}  // namespace lw::host
