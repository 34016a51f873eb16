# The difference a scenario makes: pooled on top, then each community.

const SINGLE_HEIGHT = 46.0 # the pooled row, apart from the others

"The colour of a change: up, down, or neither for sure."
change_colour(low, high, cell) = !answers(cell) ? GREY : low > 0 ? BLUE : high < 0 ? ORANGE : QUIET

"Equal room on both sides of no change."
function difference_scale(table)
    ends = filter(isfinite, vcat(table.difference_low, table.difference_high, table.spread_low, table.spread_high))
    reach = min(1.0, max(0.01, 1.08maximum(abs, vcat(0.0, ends))))
    return Scale(-reach, reach, LEFT, RIGHT)
end

function svg(cf::Counterfactual)
    table, cells = table_of(cf), difference_cells(table_of(cf))
    count = min(length(cells) - 1, PICTURED)
    height = row_height(count)
    floor_y = TOP + SINGLE_HEIGHT + count * height + 6
    scale = difference_scale(table)
    parts = vcat(heading(pooled_sentence(table, cells[1]), counterfactual_subtitle(table)), change_legend(table),
                 axis(scale, floor_y, ticks(scale.low, scale.high; count = 5), whole_points_text, "change in turnout, percentage points"),
                 line(scale(0), TOP, scale(0), floor_y; colour = INK, width = 1.5),
                 line(16, TOP + SINGLE_HEIGHT - 4, WIDTH - 16, TOP + SINGLE_HEIGHT - 4; colour = FAINT, width = 2))
    append!(parts, difference_marks(table, cells[1], 1, scale, TOP + SINGLE_HEIGHT / 2 - 4, 26.0, true))
    for k in 1:count
        y = TOP + SINGLE_HEIGHT + (k - 0.5) * height
        append!(parts, difference_marks(table, cells[k+1], k + 1, scale, y, height, labelled(k, height)))
    end
    push!(parts, footnote(floor_y + 52, counterfactual_note(cells, count)))
    return picture(WIDTH, round(Int, floor_y + BOTTOM), counterfactual_heading(cf), parts)
end

"The answer in one line: before, after, change."
function pooled_sentence(table, cell)
    answers(cell) || return "No pooled answer: some community has not converged"
    before = interval_text(table.baseline_least[1], table.baseline_greatest[1], table.baseline_verdict[1], percent_text)
    after = interval_text(table.scenario_least[1], table.scenario_greatest[1], table.scenario_verdict[1], percent_text)
    return "Pooled turnout: $before in the baseline, $after in the scenario"
end

function counterfactual_subtitle(table)
    several = SEVERAL in table.baseline_verdict || SEVERAL in table.scenario_verdict
    return string(communities_text(length(table.scope) - 1), "; marks: expected change",
                  several ? "; thick bars: over all equilibria" : "",
                  isnan(table.spread_low[1]) ? "" : "; thin lines: 5 to 95 % of plays")
end

function change_legend(table)
    entries = (("turnout rises", BLUE), ("turnout falls", ORANGE), ("sign open", QUIET), ("no answer", GREY))
    colours = [change_colour(low, high, cell) for (low, high, cell)
               in zip(table.difference_low, table.difference_high, difference_cells(table))][2:end]
    parts, x = String[], 24.0
    for (text, colour) in entries
        found = count(==(colour), colours)
        found == 0 && continue
        label = "$text in $(grouped(found))"
        push!(parts, change_mark(colour, x, x, 70; size = 6), words(x + 13, 74, label; size = 13))
        x += 44 + 7length(label)
    end
    return parts
end

"Triangles point the way of the change, a circle means an open sign, a cross no answer."
function change_mark(colour, low, high, y; size)
    high - low <= 1 && return change_shape(colour, (low + high) / 2, y, size)
    bar = line(low, y, high, y; colour = colour, width = size) # the middle of an interval is no answer: shapes at its ends
    return bar * change_shape(colour, low, y, size) * change_shape(colour, high, y, size)
end

function change_shape(colour, x, y, size)
    colour == BLUE && return polygon([(x - size, y - size), (x + size, y), (x - size, y + size)]; fill = colour)
    colour == ORANGE && return polygon([(x + size, y - size), (x - size, y), (x + size, y + size)]; fill = colour)
    colour == QUIET && return circle(x, y, size - 1; fill = "white", colour = colour)
    return line(x - size, y - size, x + size, y + size; colour = colour, width = 2) *
           line(x - size, y + size, x + size, y - size; colour = colour, width = 2)
end

function difference_marks(table, cell, k, scale, y, height, with_words)
    low, high = table.difference_low[k], table.difference_high[k]
    colour = change_colour(low, high, cell)
    parts = String[]
    answers(cell) && isfinite(table.spread_low[k]) &&
        push!(parts, line(scale(table.spread_low[k]), y, scale(table.spread_high[k]), y; colour = colour, width = 1.2))
    answers(cell) && push!(parts, change_mark(colour, scale(low), scale(high), y; size = height < 12 ? 2 : height < 18 ? 4 : 6))
    with_words || return parts
    weight = k == 1 ? "bold" : "normal"
    size = k == 1 ? 14 : letters(height)
    push!(parts, words(LEFT - 14, y + 4, clip(row_name(table, k, cell), 18); size = size, anchor = "end", weight = weight),
          words(RIGHT + 18, y + 4, interval_text(low, high, cell.verdict, points_text); size = size, colour = colour, weight = "bold"))
    return parts
end

function counterfactual_note(cells, count)
    notes = any(small, cells[2:end]) ? [SMALL_NOTE] : String[]
    length(cells) - 1 > count && pushfirst!(notes, "the first $count of $(grouped(length(cells) - 1)) communities")
    return join(notes, "; ")
end
