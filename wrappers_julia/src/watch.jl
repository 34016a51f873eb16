# Long calls: progress, interrupts and options. The kernel polls `on_progress` about ten times a
# second on the thread that called it.

const PROGRESS = Logging.LogLevel(-1)
const CALLBACK = Ref{Ptr{Cvoid}}(C_NULL) # made in __init__: its address is valid in one process only

mutable struct Watch
    verb::String
    id::Symbol
    began::Float64
    line::String # the last one shown in the terminal
    problem::Any
end

Watch(verb) = Watch(verb, gensym(verb), time(), "", nothing)

log_progress(watch, progress) =
    Logging.@logmsg PROGRESS watch.verb progress = progress _id = watch.id

"Whether the session would see nothing of a progress record."
needs_line() = isinteractive() && stderr isa Base.TTY &&
               Logging.min_enabled_level(Logging.current_logger()) > PROGRESS

function report(watch, done, total)
    progress = total > 0 ? done / total : 0.0
    log_progress(watch, progress)
    seconds = floor(Int, time() - watch.began)
    seconds >= 1 && needs_line() && show_line(watch, "$(watch.verb): $(percent_text(progress)), $seconds s (Ctrl-C stops it)")
end

function show_line(watch, line)
    line == watch.line || print(stderr, "\r\e[K", line)
    watch.line = line
end

# An exception must not travel through the kernel's frames: it is kept, the run is cancelled, and the
# exception goes on after the kernel has returned.
function on_progress(done::Int64, total::Int64, user::Ptr{Cvoid})::Cint
    watch = unsafe_pointer_to_objref(user)::Watch
    try
        Base.reenable_sigint() do
            report(watch, done, total)
            yield()
        end
        return Cint(0)
    catch problem
        watch.problem = problem
        return Cint(1)
    end
end

make_callback() = @cfunction(on_progress, Cint, (Int64, Int64, Ptr{Cvoid}))

function finish(watch)
    log_progress(watch, "done")
    isempty(watch.line) || print(stderr, "\r\e[K")
end

function new_options(; settings...)
    options = create(Raw.folkmote_options_create, Raw.folkmote_options)
    for (name, value) in settings
        check(message -> Raw.folkmote_options_set(options, OPTIONS[name], one_number(value, name), message))
    end
    return options
end

const OPTIONS = (tolerance = Raw.FOLKMOTE_TOLERANCE, sweeps = Raw.FOLKMOTE_SWEEPS,
                 threads = Raw.FOLKMOTE_THREADS, common = Raw.FOLKMOTE_COMMON_DRAWS,
                 stakes = Raw.FOLKMOTE_OVER_STAKES, control = Raw.FOLKMOTE_CONTROL)

one_number(value::Real, name) = Float64(value)
one_number(value, name) = refuse("$name = $(repr(value)) cannot be used: it must be one number.")

# The C frames must stay on their thread while other tasks run in `yield`.
function pinned(call)
    task = current_task()
    was = task.sticky
    task.sticky = true
    try
        return call()
    finally
        task.sticky = was
    end
end

"""
Run one long call of the kernel, `call(options, message)`, with progress, and so that Ctrl-C stops it
and leaves the session as it was.
"""
function watched(call, verb; settings...)
    watch = Watch(verb)
    options = new_options(; settings...)
    GC.@preserve watch begin
        user = pointer_from_objref(watch)
        check(message -> Raw.folkmote_options_progress(options, CALLBACK[], user, message))
        try
            pinned(() -> disable_sigint(() -> check(message -> call(options, message))))
        catch
            watch.problem === nothing && rethrow()
        finally
            finish(watch)
            close(options)
        end
    end
    watch.problem === nothing || throw(watch.problem)
    return nothing
end

"Worker threads when none are named: as many as Julia was started with."
default_threads() = Threads.nthreads()
