# Turnout given the obstacle: one small panel per community, both ends drawn.

const PANELS = 60
const PANEL_TOP = 64

"The rows of each community, in the order of the table, for the first threshold only."
function curve_rows(table)
    chosen = haskey(table, :at_least) ? findall(isequal(table.at_least[1]), table.at_least) : 1:length(table.given)
    found = Dict{Any,Vector{Int}}()
    order = Any[]
    for k in chosen
        haskey(found, table.community[k]) || push!(order, table.community[k])
        push!(get!(found, table.community[k], Int[]), k)
    end
    return [community => sort(found[community]; by = k -> table.given[k]) for community in order]
end

has_curve(found::Turnout) = haskey(table_of(found), :given) && length(unique(table_of(found).given)) > 1

function svg(found::Turnout)
    table, cells = table_of(found), getfield(found, :cells)
    curves = curve_rows(table)
    shown = curves[1:min(length(curves), PANELS)]
    across = length(shown) == 1 ? 1 : clamp(ceil(Int, sqrt(1.5length(shown))), 2, 8)
    width = (WIDTH - 70) / across
    height = length(shown) == 1 ? 330.0 : max(96.0, 0.78width)
    down = cld(length(shown), across)
    parts = curve_heading(cells)
    for (k, curve) in enumerate(shown)
        left, top = 52 + (k - 1) % across * width, PANEL_TOP + (k - 1) ÷ across * height
        last_row = k > length(shown) - across
        append!(parts, panel(table, curve, cells[curve.first], left, top, width - 14, height - 24, (k - 1) % across == 0, last_row))
    end
    floor_y = PANEL_TOP + down * height
    push!(parts, words(WIDTH / 2, floor_y + 26, "obstacle (larger is worse)"; size = 13, anchor = "middle"),
          footnote(floor_y + 48, picture_note(cells, length(curves), length(shown))))
    return picture(WIDTH, round(Int, floor_y + BOTTOM), string(page(found, 1).heading), parts)
end

function curve_heading(cells)
    several = any(cell -> cell.verdict === SEVERAL, values(cells))
    subtitle = several ? "solid: greatest equilibrium; dashed: least; shaded: in between" : "expected share of members who act"
    return heading("Turnout given the obstacle", subtitle)
end

function panel(table, curve, cell, left, top, width, height, first_column, last_row)
    rows = curve.second
    across = Scale(table.given[rows[1]], table.given[rows[end]], left, left + width)
    up = Scale(0, 1, top + height, top + 18)
    parts = vcat(panel_frame(across, up, first_column, last_row),
                 words(left, top + 12, clip(starred(curve.first, cell), round(Int, width / 7)); size = 12, weight = "bold"))
    answers(cell) || return push!(parts, words(left + width / 2, top + height / 2 + 12, "no answer"; size = 12,
                                               colour = GREY, anchor = "middle"))
    return append!(parts, curve_lines(table, rows, across, up, COLOURS[cell.verdict]))
end

function panel_frame(across, up, first_column, last_row)
    parts = String[]
    for value in (0, 0.5, 1)
        push!(parts, line(across.left, up(value), across.right, up(value); colour = FAINT))
        first_column && push!(parts, words(across.left - 6, up(value) + 4, percent_text(value); size = 10, colour = QUIET, anchor = "end"))
    end
    last_row || return parts
    for value in ticks(across.low, across.high; count = across.right - across.left > 300 ? 6 : 2)
        push!(parts, line(across(value), up(0), across(value), up(0) + 4; colour = QUIET),
              words(across(value), up(0) + 16, @sprintf("%.3g", value); size = 10, colour = QUIET, anchor = "middle"))
    end
    return parts
end

function curve_lines(table, rows, across, up, colour)
    points(ends) = [(across(table.given[k]), up(ends[k])) for k in rows]
    low, high = points(table.turnout_least), points(table.turnout_greatest)
    return [polygon(vcat(low, reverse(high)); fill = colour, opacity = 0.18),
            polyline(low; colour = colour, dash = "5,3"), polyline(high; colour = colour)]
end
