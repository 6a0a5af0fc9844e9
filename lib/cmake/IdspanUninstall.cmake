# SPDX-License-Identifier: BSD-2-Clause
#
# cmake -DMANIFEST=BUILD/install_manifest.txt -P IdspanUninstall.cmake, as target `uninstall`:
# removes the files of the last installation and then the folders of that name that are empty.
# DESTDIR counts as it did then.
if(NOT EXISTS "${MANIFEST}")
    message(FATAL_ERROR "nothing was installed from this build: there is no ${MANIFEST}")
endif()
file(STRINGS "${MANIFEST}" paths)
set(folders "")
foreach(path IN LISTS paths)
    file(REMOVE "$ENV{DESTDIR}${path}")
    cmake_path(GET path PARENT_PATH folder)
    while(folder MATCHES "/idspan(/|$)")
        list(APPEND folders "${folder}")
        cmake_path(GET folder PARENT_PATH folder)
    endwhile()
endforeach()

# The deepest first.
list(REMOVE_DUPLICATES folders)
list(SORT folders ORDER DESCENDING)
foreach(folder IN LISTS folders)
    file(GLOB left LIST_DIRECTORIES true "$ENV{DESTDIR}${folder}/*" "$ENV{DESTDIR}${folder}/.*")
    if(NOT left AND IS_DIRECTORY "$ENV{DESTDIR}${folder}")
        file(REMOVE_RECURSE "$ENV{DESTDIR}${folder}")
    endif()
endforeach()
