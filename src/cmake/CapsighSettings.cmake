# Language level, warnings, sanitizers, and the function that declares a room.
set(CMAKE_CXX_STANDARD 20)
set(CMAKE_CXX_STANDARD_REQUIRED ON)
set(CMAKE_CXX_EXTENSIONS OFF)
set(CMAKE_EXPORT_COMPILE_COMMANDS ON)
set(CMAKE_POSITION_INDEPENDENT_CODE ON)
if(NOT CMAKE_BUILD_TYPE AND NOT CMAKE_CONFIGURATION_TYPES)
  set(CMAKE_BUILD_TYPE Release CACHE STRING "" FORCE)
endif()

include(GNUInstallDirs)
include(CMakePackageConfigHelpers)

add_library(capsigh_settings INTERFACE)
target_compile_options(capsigh_settings INTERFACE -Wall -Wextra -Wpedantic -Wshadow -Wconversion
                       -Wsign-conversion -Wold-style-cast -Woverloaded-virtual
                       -Wnon-virtual-dtor -Wdouble-promotion)
# Results must not depend on whether a compiler fuses a multiplication with an addition.
target_compile_options(capsigh_settings INTERFACE -ffp-contract=off)
if(CAPSIGH_WERROR)
  target_compile_options(capsigh_settings INTERFACE -Werror)
  if(CMAKE_CXX_COMPILER_ID STREQUAL "GNU")
    # False positives of g++ 12: inside std::variant and std::optional once they are inlined, and in
    # operator+ of std::string (GCC bug 105651).
    target_compile_options(capsigh_settings INTERFACE -Wno-error=maybe-uninitialized
                           -Wno-restrict)
  endif()
endif()
if(CAPSIGH_FUZZ)
  target_compile_options(capsigh_settings INTERFACE -fsanitize=fuzzer-no-link)
endif()
if(CAPSIGH_SANITIZE)
  target_compile_options(capsigh_settings INTERFACE -fsanitize=${CAPSIGH_SANITIZE}
                         -fno-sanitize-recover=all -fno-omit-frame-pointer -g)
  target_link_options(capsigh_settings INTERFACE -fsanitize=${CAPSIGH_SANITIZE})
endif()

# capsigh_room(NAME SOURCES ... [SEES rooms whose headers this room's headers use]
#              [USES rooms and libraries of its sources only] [LIBRARIES of its headers])
# A room is a static library that exposes its own include root and those of the rooms it sees,
# nothing else: an include of a higher room finds no file.
function(capsigh_room name)
  cmake_parse_arguments(ROOM "" "" "SOURCES;SEES;USES;LIBRARIES" ${ARGN})
  set(target capsigh_${name})
  list(TRANSFORM ROOM_SOURCES PREPEND "${CMAKE_CURRENT_SOURCE_DIR}/${name}/")
  list(TRANSFORM ROOM_SEES PREPEND capsigh_)
  add_library(${target} STATIC ${ROOM_SOURCES})
  add_library(capsigh::${name} ALIAS ${target})
  set_target_properties(${target} PROPERTIES EXPORT_NAME ${name})
  target_include_directories(${target} PUBLIC
    $<BUILD_INTERFACE:${PROJECT_SOURCE_DIR}/include/${name}>
    $<INSTALL_INTERFACE:${CMAKE_INSTALL_INCLUDEDIR}/capsigh-rooms/${name}>)
  target_compile_features(${target} PUBLIC cxx_std_20)
  target_link_libraries(${target} PUBLIC ${ROOM_SEES} ${ROOM_LIBRARIES}
                        PRIVATE $<BUILD_INTERFACE:capsigh_settings> ${ROOM_USES})
  install(TARGETS ${target} EXPORT capsigh)
  install(DIRECTORY ${PROJECT_SOURCE_DIR}/include/${name}
          DESTINATION ${CMAKE_INSTALL_INCLUDEDIR}/capsigh-rooms)
endfunction()
