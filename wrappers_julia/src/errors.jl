"""
    FolkmoteError

What every refusal of this package is. `code` is the kernel's status name, such as
`:FOLKMOTE_BAD_DATA` (a table breaks a rule), `:FOLKMOTE_BAD_ARGUMENT` (a value is out of range),
`:FOLKMOTE_OUT_OF_MEMORY`, `:FOLKMOTE_CANCELLED` or `:FOLKMOTE_INTERNAL`; `sentence` says what is
wrong, where, and what to do. `showerror` prints the sentence. The session goes on after it.

# Example
```julia
try
    study((community = [1, 1], member = [1, 1]))
catch refusal
    refusal.code, refusal.sentence
end
```
"""
struct FolkmoteError <: Exception
    code::Symbol
    sentence::String
end

Base.showerror(io::IO, refusal::FolkmoteError) = print(io, refusal.sentence)

"Refuse an argument with a sentence of the wrapper's own."
refuse(sentence) = throw(FolkmoteError(:FOLKMOTE_BAD_ARGUMENT, sentence))

"Refuse a table with a sentence of the wrapper's own."
refuse_data(sentence) = throw(FolkmoteError(:FOLKMOTE_BAD_DATA, sentence))
