# Where the kernel is, and whether it is the one this wrapper was written for.

package_folder() = dirname(@__DIR__)
build_folder() = joinpath(package_folder(), "deps", "build")
built_library() = joinpath(build_folder(), "libfolkmote." * Libdl.dlext)

function library_path()
    named = get(ENV, "FOLKMOTE_LIBRARY", "")
    return isempty(named) ? built_library() : named
end

"Sentence that says how the library's constants differ from the wrapper's; empty when they agree."
function mismatch(version, stream_version, message_bytes)
    found = (version, Int(stream_version), Int(message_bytes))
    wanted = (Raw.FOLKMOTE_VERSION, Raw.FOLKMOTE_STREAM_VERSION, Raw.FOLKMOTE_MESSAGE_BYTES)
    found == wanted && return ""
    describe(x) = "version $(x[1]), stream version $(x[2]), message size $(x[3])"
    return "the folkmote library found has $(describe(found)) but this package needs " *
           "$(describe(wanted)): set FOLKMOTE_LIBRARY to a matching library or run Folkmote.build()."
end

loaded_mismatch() = mismatch(unsafe_string(Raw.folkmote_version()), Raw.folkmote_stream_version(),
                             Raw.folkmote_message_bytes())

"Look up every function once; the sentence that names what is absent, or an empty one."
function look_up(library)
    absent = Symbol[]
    for (name, entry) in Raw.FUNCTIONS
        entry.address[] = something(Libdl.dlsym(library, name; throw_error = false), C_NULL)
        entry.address[] == C_NULL && push!(absent, name)
    end
    isempty(absent) && return ""
    return "the folkmote library found lacks $(join(sort(absent), ", ")): set FOLKMOTE_LIBRARY to a " *
           "matching library or run Folkmote.build()."
end

function open_and_compare(path)
    isfile(path) || return "There is no folkmote library at $path: set FOLKMOTE_LIBRARY to the path " *
                           "of libfolkmote.$(Libdl.dlext) or run Folkmote.build()."
    library = Libdl.dlopen(path, Libdl.RTLD_NOW | Libdl.RTLD_LOCAL; throw_error = false)
    library === nothing && return "the file $path cannot be loaded as a library: set FOLKMOTE_LIBRARY " *
                                  "to another libfolkmote.$(Libdl.dlext) or run Folkmote.build()."
    problem = look_up(library)
    return isempty(problem) ? loaded_mismatch() : problem
end

"Attach the library at `path`. Returns the sentence that says why not, or an empty one."
function attach(path = library_path())
    problem = open_and_compare(path)
    Raw.PROBLEM[] = problem
    if !isempty(problem) # a half-fitting library is worse than none
        foreach(entry -> entry.address[] = C_NULL, values(Raw.FUNCTIONS))
    end
    return problem
end

"""
    Folkmote.build(; jobs = 1)

Build the kernel with CMake and a C++20 compiler from the repository in which this package stands,
into `wrappers_julia/deps/build`, and load it. Needs the whole repository, CMake, and the Boost, Eigen
and PCG headers. Returns the path of the library. Not needed when the environment variable
`FOLKMOTE_LIBRARY` names a library.

# Example
```julia
import Folkmote
Folkmote.build(jobs = 4)
```
"""
function build(; jobs = 1)
    source, target = dirname(package_folder()), build_folder()
    isfile(joinpath(source, "CMakeLists.txt")) ||
        refuse("Folkmote.build() needs the whole folkmote repository round this package; " *
               "there is no CMakeLists.txt in $source. Set FOLKMOTE_LIBRARY instead.")
    Sys.which("cmake") === nothing && refuse("Folkmote.build() needs cmake; install it and try again.")
    mkpath(target)
    run(`cmake -S $source -B $target -DCMAKE_BUILD_TYPE=Release -DCMAKE_LIBRARY_OUTPUT_DIRECTORY=$target`)
    run(`cmake --build $target --target folkmote --parallel $jobs`)
    problem = attach(built_library())
    isempty(problem) || refuse(problem)
    return built_library()
end
