# Turns text files into one C source of byte arrays, each closed by NUL:
#   cmake -DOUT=schema.c -DFILES=a.sql;b.sql -DHEADER=store/schema.h -DPREFIX=pf_schema_ -P embed.cmake
# schema/001_layout.sql becomes pf_schema_001_layout, and so on.
set(text "#include \"${HEADER}\"\n")
foreach(file IN LISTS FILES)
  get_filename_component(name ${file} NAME_WE)
  file(READ ${file} bytes HEX)
  string(REGEX REPLACE "(..)" "0x\\1," bytes "${bytes}")
  string(APPEND text "const char ${PREFIX}${name}[] = {${bytes}0};\n")
endforeach()
file(WRITE ${OUT} "${text}")
