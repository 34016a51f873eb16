# The frame that the pictures with one row per community share.

const WIDTH = 720
const TOP = 92     # title, subtitle, legend
const BOTTOM = 58  # axis and notes
const LEFT, RIGHT = 150, 560
const PICTURED = 200 # communities at most in one picture

row_height(count) = count <= 12 ? 26.0 : count <= 30 ? 20.0 : count <= 60 ? 15.0 : max(4.0, 900 / count)
letters(height) = clamp(round(Int, 0.72height), 9, 13)

"Every row where the letters have room, else every k-th."
labelled(k, height) = height >= 11 || k % ceil(Int, 11 / height) == 1

heading(title, subtitle) = [words(16, 28, title; size = 18, weight = "bold"),
                            words(16, 48, subtitle; size = 13, colour = QUIET)]

# ---- Marks: colour and shape both tell the verdict ------------------------------------------------

const COLOURS = Dict(UNIQUE => BLUE, BRACKETED => GREEN, SEVERAL => ORANGE, NOT_CONVERGED => GREY)

"The mark of an interval low..high (pixels) at height y."
function mark(verdict, low, high, y; size = 5)
    verdict === SEVERAL && return several_mark(low, high, y, size)
    verdict === NOT_CONVERGED && return unsolved_mark(low, high, y, size)
    fill = verdict === UNIQUE ? BLUE : "white"
    bar = high - low > 1 ? line(low, y, high, y; colour = COLOURS[verdict], width = 3) : ""
    return bar * circle((low + high) / 2, y, size; fill = fill, colour = COLOURS[verdict])
end

function several_mark(low, high, y, size)
    diamond(x) = polygon([(x - size, y), (x, y - size), (x + size, y), (x, y + size)]; fill = ORANGE)
    return line(low, y, high, y; colour = ORANGE, width = 5) * diamond(low) * diamond(high)
end

"A dashed frame, never so narrow that it reads as a point: somewhere in here, and no answer."
function unsolved_mark(low, high, y, size)
    wider = max(0, 18 - (high - low)) / 2
    return box(low - wider, y - size, high - low + 2wider, 2size; colour = GREY, dash = "3,2")
end

"Marks with their meaning and number, in one line."
function legend(verdicts, y)
    parts, x = String[], 24.0
    for (verdict, count) in verdict_counts(verdicts)
        wide = verdict in (SEVERAL, NOT_CONVERGED) ? 22 : 0
        text = "$(grouped(count)) $(verdict)" * (verdict === NOT_CONVERGED ? ": no answer" : "")
        push!(parts, mark(verdict, x, x + wide, y - 4), words(x + wide + 11, y, text; size = 13))
        x += wide + 40 + 7.2length(text)
    end
    return parts
end

"Faint vertical lines with numbers under them."
function axis(scale, y, positions, text, name)
    parts = [words((scale.left + scale.right) / 2, y + 34, name; size = 13, anchor = "middle")]
    for value in positions
        push!(parts, line(scale(value), TOP, scale(value), y; colour = FAINT),
              words(scale(value), y + 17, text(value); size = 12, colour = QUIET, anchor = "middle"))
    end
    return parts
end

footnote(y, note) = words(16, y, note; size = 11, colour = QUIET)
