# Writes files as arrays of a C++ source: cmake -DOUT=x.cpp "-DNAMES=a;b" "-DFILES=a.bin;b.bin" -P embed.cmake
# Each becomes `extern const unsigned char NAME[]; extern const unsigned NAME_size;` in namespace lw::page.
set(text "// Written by web/build/embed.cmake.\nnamespace lw::page {\n")
foreach(name file IN ZIP_LISTS NAMES FILES)
  file(READ "${file}" hex HEX)
  string(LENGTH "${hex}" digits)
  math(EXPR size "${digits} / 2")
  string(REGEX REPLACE "(..)" "0x\\1," bytes "${hex}")
  string(APPEND text "extern const unsigned char ${name}[];\nconst unsigned char ${name}[] = {${bytes}};\n"
         "extern const unsigned ${name}_size;\nconst unsigned ${name}_size = ${size};\n")
endforeach()
file(WRITE "${OUT}" "${text}}  // namespace lw::page\n")
