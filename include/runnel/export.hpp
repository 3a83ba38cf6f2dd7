#pragma once

/// RUNNEL_EXPORT marks what the shared library shows; everything else stays hidden.
#if defined(RUNNEL_STATIC)
#define RUNNEL_EXPORT
#elif defined(_WIN32)
#if defined(RUNNEL_BUILDING)
#define RUNNEL_EXPORT __declspec(dllexport)
#else
#define RUNNEL_EXPORT __declspec(dllimport)
#endif
#else
#define RUNNEL_EXPORT __attribute__((visibility("default")))
#endif

/// All of Runnel lives in `runnel::inline v1`; the inner name changes when the binary interface does.
#define RUNNEL_NAMESPACE_BEGIN                                                                               \
    namespace runnel {                                                                                       \
    inline namespace v1 {
#define RUNNEL_NAMESPACE_END                                                                                 \
    }                                                                                                        \
    }
