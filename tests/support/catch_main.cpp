// Catch2's main takes fifteen seconds to compile: it lives in this one unit.
#define CATCH_CONFIG_MAIN
#include <catch2/catch.hpp>
