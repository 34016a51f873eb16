# Cutoffs against information held: one point per member, nobody named.

struct CutoffPicture
    equilibrium::Equilibrium
end

"""
    cutoff_picture(eq)

A picture of every member's cutoff (units of the obstacle) against the information that it holds (precision beside the
prior), all communities together and nobody named: one point per member, and a bar from the least to the greatest
equilibrium where there are several. Shows as SVG in a notebook; `svg` text from `show(io, "image/svg+xml", picture)`.
Communities that have not converged are left out, and the subtitle counts them.

# Example
```julia
cutoff_picture(eq)
```
"""
cutoff_picture(eq::Equilibrium) = CutoffPicture(eq)

Base.show(io::IO, picture::CutoffPicture) = print(io, "cutoffs by information held (a picture; show it as image/svg+xml)")
Base.show(io::IO, ::MIME"image/svg+xml", picture::CutoffPicture) = print(io, svg(picture))

const POINTS = 4000 # in one picture; of more, every k-th

function svg(shown::CutoffPicture)
    eq = getfield(shown, :equilibrium)
    members, cells = columns(eq; level = :member), cells_of(eq)
    rows = filter(k -> answers(cells[members.community[k]]), 1:length(members.member))
    rows = rows[1:cld(max(length(rows), 1), POINTS):end]
    floor_y = 440
    parts = vcat(heading("Cutoffs by information held", "a point is a member; bars run from the least to the greatest equilibrium"),
                 legend([cells[community].verdict for community in unique(members.community)], 74))
    isempty(rows) || append!(parts, cutoff_marks(members, cells, rows, floor_y))
    return picture(WIDTH, floor_y + BOTTOM, "cutoffs by information held", parts)
end

"A scale with a little room at both ends."
function roomy(values, left, right)
    low, high = extrema(values)
    room = max(high - low, 1e-3 * max(abs(low), abs(high), 1)) * 0.06
    return Scale(low - room, high + room, left, right)
end

function cutoff_marks(members, cells, rows, floor_y)
    held = members.information_held[rows]
    wide = minimum(held) > 0 && maximum(held) > 30 * minimum(held)
    at = wide ? log10 : identity
    across = roomy(at.(held), 80, WIDTH - 30)
    up = roomy(vcat(members.cutoff_least[rows], members.cutoff_greatest[rows]), floor_y, TOP + 6)
    parts = cutoff_axes(across, up, floor_y, wide)
    for (k, x) in zip(rows, held)
        verdict = cells[members.community[k]].verdict
        low, high, x = up(members.cutoff_least[k]), up(members.cutoff_greatest[k]), across(at(x))
        verdict === SEVERAL && push!(parts, line(x, low, x, high; colour = ORANGE), square(x, low), square(x, high))
        verdict === SEVERAL || push!(parts, circle(x, high, 3; fill = "white", colour = COLOURS[verdict]))
    end
    return parts
end

square(x, y) = polygon([(x - 3, y - 3), (x + 3, y - 3), (x + 3, y + 3), (x - 3, y + 3)]; fill = ORANGE)

function cutoff_axes(across, up, floor_y, wide)
    parts = [words((across.left + across.right) / 2, floor_y + 36, "information held (precision beside the prior)"; size = 13, anchor = "middle"),
             words(16, TOP - 2, "cutoff (units of the obstacle)"; size = 12, colour = QUIET)]
    for value in ticks(across.low, across.high)
        push!(parts, line(across(value), up.right, across(value), up.left; colour = FAINT),
              words(across(value), floor_y + 17, @sprintf("%.3g", wide ? 10.0^value : value); size = 11, colour = QUIET, anchor = "middle"))
    end
    for value in ticks(up.low, up.high)
        push!(parts, line(across.left, up(value), across.right, up(value); colour = FAINT),
              words(across.left - 8, up(value) + 4, @sprintf("%.4g", value); size = 11, colour = QUIET, anchor = "end"))
    end
    return parts
end
