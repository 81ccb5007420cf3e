# Writes scenario files into a C++ source: cmake -DOUT=x.cpp "-DFILES=a.toml;b.toml" -P library.cmake
# What it defines is declared in web/panel/library.h.
set(arrays "")
set(table "")
set(count 0)
foreach(file IN LISTS FILES)
  file(READ "${file}" hex HEX)
  string(LENGTH "${hex}" digits)
  math(EXPR size "${digits} / 2")
  string(REGEX REPLACE "(..)" "'\\\\x\\1'," bytes "${hex}")
  get_filename_component(name "${file}" NAME)
  string(APPEND arrays "const char text_${count}[] = {${bytes}'\\0'};\n")
  string(APPEND table "    {\"${name}\", text_${count}, ${size}},\n")
  math(EXPR count "${count} + 1")
endforeach()
string(CONCAT text "// Written by web/build/library.cmake.\n#include \"web/panel/library.h\"\n\n"
       "namespace lw::panel {\nnamespace {\n${arrays}}  // namespace\n"
       "const LibraryFile library_files[] = {\n${table}    {nullptr, nullptr, 0}};\n"
       "const std::size_t library_count = ${count};\n}  // namespace lw::panel\n")
file(WRITE "${OUT}" "${text}")
