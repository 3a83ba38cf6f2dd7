# What is tested beyond the executables of a folder each.

# Every public header compiles alone, twice in one file.
file(GLOB headers CONFIGURE_DEPENDS ${PROJECT_SOURCE_DIR}/include/runnel/*.hpp)
set(alone "")
foreach(header ${headers})
  get_filename_component(name ${header} NAME_WE)
  set(file ${CMAKE_CURRENT_BINARY_DIR}/alone/${name}.cpp)
  file(CONFIGURE OUTPUT ${file} CONTENT "#include <runnel/${name}.hpp>\n#include <runnel/${name}.hpp>\n")
  list(APPEND alone ${file})
endforeach()
add_library(runnel_headers_alone OBJECT ${alone})
target_include_directories(runnel_headers_alone PRIVATE ${PROJECT_SOURCE_DIR}/include)
target_link_libraries(runnel_headers_alone PRIVATE runnel_flags)

# The program that the README shows is compiled as it stands there.
find_program(RUNNEL_PYTHON NAMES python3 PATHS /usr/bin NO_DEFAULT_PATH REQUIRED)
set(shown ${CMAKE_CURRENT_BINARY_DIR}/readme_program.cpp)
add_custom_command(
  OUTPUT ${shown}
  COMMAND ${RUNNEL_PYTHON} ${CMAKE_CURRENT_SOURCE_DIR}/cli/readme_program.py ${PROJECT_SOURCE_DIR}/README.md ${shown}
  DEPENDS ${PROJECT_SOURCE_DIR}/README.md ${CMAKE_CURRENT_SOURCE_DIR}/cli/readme_program.py)
add_executable(readme_program ${shown})
target_link_libraries(readme_program PRIVATE runnel::runnel runnel_flags)

# Another project takes the library in; configuring is enough to see that its defaults do not leak.
add_test(NAME consumer
         COMMAND ${CMAKE_COMMAND} -S ${CMAKE_CURRENT_SOURCE_DIR}/consumer -B ${CMAKE_CURRENT_BINARY_DIR}/consumer
                 -DCMAKE_CXX_COMPILER=${CMAKE_CXX_COMPILER} -DRUNNEL_SOURCE=${PROJECT_SOURCE_DIR}
                 -DRUNNEL_BOOST_INCLUDE=${RUNNEL_BOOST_INCLUDE})

if(TARGET runnel_cli)
  foreach(name cli readme)
    add_test(NAME ${name} COMMAND ${RUNNEL_PYTHON} ${CMAKE_CURRENT_SOURCE_DIR}/cli/${name}_test.py)
    set_tests_properties(${name} PROPERTIES ENVIRONMENT
                         "RUNNEL=$<TARGET_FILE:runnel_cli>;README_PROGRAM=$<TARGET_FILE:readme_program>")
  endforeach()
endif()

include(${CMAKE_CURRENT_SOURCE_DIR}/problems/schema.cmake)
