# Turnout by community, from the least to the greatest equilibrium.

function svg(eq::Equilibrium)
    table, cells = table_of(eq), cells_of(eq)
    count = min(length(table.community), PICTURED)
    height = row_height(count)
    floor_y = TOP + count * height
    scale = Scale(0, 1, LEFT, RIGHT)
    parts = vcat(heading("Turnout in equilibrium", equilibrium_subtitle(table)),
                 legend(table.verdict, 74),
                 axis(scale, floor_y, 0:0.25:1, percent_text, "expected turnout"))
    for k in 1:count
        append!(parts, equilibrium_marks(table, cells[table.community[k]], k, scale, height))
    end
    push!(parts, footnote(floor_y + 52, picture_note(cells, length(table.community), count)))
    return picture(WIDTH, round(Int, floor_y + BOTTOM), string(page(eq, 1).heading), parts)
end

function equilibrium_subtitle(table)
    bars = SEVERAL in table.verdict ? "bars run from the least to the greatest equilibrium" : "expected share of members who act"
    return "$(communities_text(length(table.community))); $bars"
end

function equilibrium_marks(table, cell, k, scale, height)
    y = TOP + (k - 0.5) * height
    low, high = table.turnout_least[k], table.turnout_greatest[k]
    parts = [mark(cell.verdict, scale(low), scale(high), y; size = height < 12 ? 2 : height < 18 ? 4 : 6)]
    labelled(k, height) || return parts
    name = clip(starred(table.community[k], cell), 18)
    push!(parts, words(LEFT - 14, y + 4, name; size = letters(height), anchor = "end"),
          words(RIGHT + 18, y + 4, interval_text(low, high, cell.verdict, percent_text); size = letters(height),
                colour = COLOURS[cell.verdict], weight = "bold"))
    return parts
end

function picture_note(cells, total, count)
    notes = any(small, values(cells)) ? [SMALL_NOTE] : String[]
    total > count && pushfirst!(notes, "the first $count of $(grouped(total)) communities")
    return join(notes, "; ")
end
