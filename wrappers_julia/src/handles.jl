# A handle owns one object of the kernel. The kernel writes the new object straight into a handle
# whose finalizer already stands, so that nothing can leak in between.
mutable struct Handle{T}
    pointer::Ptr{T} # first field: its address is the handle's own address
    Handle{T}() where {T} = finalizer(close, new{T}(C_NULL))
end

destroy(pointer::Ptr{Raw.folkmote_table}) = Raw.folkmote_table_destroy(pointer)
destroy(pointer::Ptr{Raw.folkmote_study}) = Raw.folkmote_study_destroy(pointer)
destroy(pointer::Ptr{Raw.folkmote_beliefs}) = Raw.folkmote_beliefs_destroy(pointer)
destroy(pointer::Ptr{Raw.folkmote_payoff}) = Raw.folkmote_payoff_destroy(pointer)
destroy(pointer::Ptr{Raw.folkmote_options}) = Raw.folkmote_options_destroy(pointer)
destroy(pointer::Ptr{Raw.folkmote_equilibrium}) = Raw.folkmote_equilibrium_destroy(pointer)
destroy(pointer::Ptr{Raw.folkmote_scenario}) = Raw.folkmote_scenario_destroy(pointer)

"Give the object back; a second time does nothing."
function Base.close(handle::Handle)
    pointer = handle.pointer
    handle.pointer = C_NULL
    pointer == C_NULL || destroy(pointer)
    return nothing
end

# What `ccall` asks for. It also keeps the handle alive during the call. A handle is empty once it is
# closed, and when it was saved to a file and read back.
function Base.unsafe_convert(::Type{Ptr{T}}, handle::Handle{T}) where {T}
    handle.pointer == C_NULL &&
        refuse("this $(noun(T)) is closed or was read back from a file; make it again from its inputs")
    return handle.pointer
end

Base.unsafe_convert(::Type{Ptr{Ptr{T}}}, handle::Handle{T}) where {T} =
    Ptr{Ptr{T}}(pointer_from_objref(handle))

noun(::Type{T}) where {T} = replace(String(nameof(T)), "folkmote_" => "")

"A kernel sentence: the bytes up to the first zero."
sentence_in(message) = String(message[1:something(findfirst(iszero, message), length(message) + 1)-1])

"""
The one place where a status becomes an exception: `call` gets room for the kernel's sentence and
returns the status.
"""
function check(call)
    message = zeros(UInt8, Raw.FOLKMOTE_MESSAGE_BYTES)
    status = call(message)
    status == Raw.FOLKMOTE_OK && return nothing
    name = Symbol(unsafe_string(Raw.folkmote_status_name(status)))
    throw(FolkmoteError(name, sentence_in(message)))
end

"A new handle of type `T`, filled by `make(handle, message)`."
function create(make, ::Type{T}) where {T}
    handle = Handle{T}()
    check(message -> make(handle, message))
    return handle
end
