# The schemas against a general-purpose validator: samples are accepted, bad plans refused as their rows say.
find_program(RUNNEL_PYTHON python3 PATHS /usr/bin NO_DEFAULT_PATH)
if(RUNNEL_PYTHON)
  set(bad_plans ${CMAKE_CURRENT_BINARY_DIR}/bad_plans)
  file(MAKE_DIRECTORY ${bad_plans})
  add_test(NAME export_bad_plans COMMAND test_problems "--test-case=export of the rows")
  set_tests_properties(export_bad_plans PROPERTIES ENVIRONMENT "RUNNEL_EXPORT_BAD_PLANS=${bad_plans}"
                                                   FIXTURES_SETUP bad_plans)
  add_test(NAME schemas COMMAND ${RUNNEL_PYTHON} ${CMAKE_CURRENT_SOURCE_DIR}/problems/schema_check.py
                                ${PROJECT_SOURCE_DIR} ${bad_plans})
  # A machine without the validator passes it over, and says so.
  set_tests_properties(schemas PROPERTIES FIXTURES_REQUIRED bad_plans SKIP_RETURN_CODE 77)
endif()
