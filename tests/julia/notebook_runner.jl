# Runs the code cells of a Jupyter notebook in order, each as a notebook would, and shows what each gives.
# It reads no more JSON than notebooks hold.

"What stands in JSON text from `position` on, and the position after it."
function read_json(text, position = firstindex(text))
    position = after_space(text, position)
    c = text[position]
    c == '{' && return read_list(text, position, '}', read_entry, Dict)
    c == '[' && return read_list(text, position, ']', read_json, identity)
    c == '"' && return read_string(text, position)
    for (word, value) in ("true" => true, "false" => false, "null" => nothing)
        startswith(SubString(text, position), word) && return value, position + length(word)
    end
    number = match(r"^-?[0-9.eE+-]+", SubString(text, position)).match
    return parse(Float64, number), position + length(number)
end

after_space(text, position) = something(findnext(!isspace, text, position), lastindex(text) + 1)

"Items up to `close`, made into a value by `make`."
function read_list(text, position, close, read_item, make)
    items = Any[]
    position = after_space(text, position + 1)
    while text[position] != close
        item, position = read_item(text, position)
        push!(items, item)
        position = after_space(text, position)
        text[position] == ',' && (position = after_space(text, position + 1))
    end
    return make(items), position + 1
end

function read_entry(text, position)
    key, position = read_string(text, position)
    value, position = read_json(text, after_space(text, position) + 1) # past the colon
    return key => value, position
end

function read_string(text, position)
    found = match(r"^\"((?:[^\"\\]|\\.)*)\"", SubString(text, position)).match
    inner = replace(chop(found; head = 1, tail = 1), "\\/" => "/")
    return unescape_string(inner), position + ncodeunits(found)
end

as_text(source::AbstractString) = String(source)
as_text(source) = join(source)

"What a notebook would show of a value, by the richest form it has."
function display_text(value)
    value === nothing && return ""
    for mime in (MIME("text/html"), MIME("image/svg+xml"))
        showable(mime, value) && return sprint(show, mime, value)
    end
    return sprint(show, MIME("text/plain"), value)
end

"Run the notebook at `path` in a module of its own; returns what its code cells show."
function run_notebook(path)
    notebook, _ = read_json(read(path, String))
    room = Module(:Notebook)
    sources = [as_text(cell["source"]) for cell in notebook["cells"] if cell["cell_type"] == "code"]
    return cd(dirname(abspath(path))) do
        [Base.invokelatest(display_text, include_string(room, source, "cell $k")) for (k, source) in enumerate(sources)]
    end
end

if abspath(PROGRAM_FILE) == @__FILE__
    foreach(println, run_notebook(ARGS[1]))
end
