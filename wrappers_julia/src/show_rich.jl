# Notebooks: the picture, and the short table under it.

const Pictured = Union{Equilibrium,Turnout,Counterfactual}

has_picture(x) = false
has_picture(x::Union{Equilibrium,Counterfactual}) = true
has_picture(x::Turnout) = has_curve(x)

Base.showable(::MIME"image/svg+xml", x::Turnout) = has_picture(x)

function Base.show(io::IO, ::MIME"image/svg+xml", x::Pictured)
    has_picture(x) || refuse("this turnout has no curve to draw; ask turnout(eq; given = several values).")
    print(io, svg(x))
end

function Base.show(io::IO, ::MIME"text/html", result::Result)
    shown = page(result, ROWS_SHOWN)
    print(io, "<div class=\"folkmote\">\n<p>", escaped(shown.heading), "</p>\n")
    if has_picture(result)
        print(io, svg(result), "<details><summary>table</summary>\n")
        html_table(io, shown)
        print(io, "</details>\n")
    else
        html_table(io, shown)
    end
    print(io, "</div>\n")
end

function html_table(io, page)
    cells(tag, texts) = join(["<$tag>$(escaped(text))</$tag>" for text in texts])
    print(io, "<table>\n<tr>", cells("th", page.names), "</tr>\n")
    foreach(row -> print(io, "<tr>", cells("td", row), "</tr>\n"), page.rows)
    print(io, "</table>\n")
    foreach(note -> print(io, "<p>", escaped(strip(note)), "</p>\n"), page_notes(page))
end
