# A few elements of SVG. Coordinates are pixels from the top left.

# Colours that remain apart for readers who see few of them (Okabe & Ito 2008); shapes say the same.
const INK, QUIET, FAINT = "#1a1a1a", "#5f5f5f", "#dddddd"
const BLUE, GREEN, ORANGE, GREY = "#0072B2", "#009E73", "#D55E00", "#8a8a8a"

escaped(text) = replace(replace(replace(replace(string(text), '&' => "&amp;"), '<' => "&lt;"), '>' => "&gt;"), '"' => "&quot;")

coordinate(x) = @sprintf("%.1f", x)

line(x1, y1, x2, y2; colour = INK, width = 1, dash = "") =
    "<line x1=\"$(coordinate(x1))\" y1=\"$(coordinate(y1))\" x2=\"$(coordinate(x2))\" y2=\"$(coordinate(y2))\" " *
    "stroke=\"$colour\" stroke-width=\"$width\" stroke-dasharray=\"$dash\"/>"

box(x, y, width, height; fill = "none", colour = "none", dash = "") =
    "<rect x=\"$(coordinate(x))\" y=\"$(coordinate(y))\" width=\"$(coordinate(max(width, 0)))\" " *
    "height=\"$(coordinate(height))\" fill=\"$fill\" stroke=\"$colour\" stroke-dasharray=\"$dash\"/>"

circle(x, y, radius; fill, colour) =
    "<circle cx=\"$(coordinate(x))\" cy=\"$(coordinate(y))\" r=\"$radius\" fill=\"$fill\" stroke=\"$colour\" stroke-width=\"2\"/>"

polygon(points; fill, colour = "none", opacity = 1) =
    "<polygon points=\"$(point_list(points))\" fill=\"$fill\" stroke=\"$colour\" fill-opacity=\"$opacity\"/>"

polyline(points; colour, width = 2, dash = "") =
    "<polyline points=\"$(point_list(points))\" fill=\"none\" stroke=\"$colour\" stroke-width=\"$width\" " *
    "stroke-dasharray=\"$dash\" stroke-linejoin=\"round\"/>"

point_list(points) = join(["$(coordinate(x)),$(coordinate(y))" for (x, y) in points], " ")

words(x, y, text; size = 12, colour = INK, anchor = "start", weight = "normal") =
    "<text x=\"$(coordinate(x))\" y=\"$(coordinate(y))\" font-size=\"$size\" fill=\"$colour\" text-anchor=\"$anchor\" " *
    "font-weight=\"$weight\">$(escaped(text))</text>"

"The whole picture; its description is for readers who do not see it."
picture(width, height, description, parts) =
    "<svg xmlns=\"http://www.w3.org/2000/svg\" width=\"$width\" height=\"$height\" viewBox=\"0 0 $width $height\" " *
    "role=\"img\" font-family=\"Helvetica, Arial, sans-serif\">\n<title>$(escaped(description))</title>\n" *
    box(0, 0, width, height; fill = "white") * "\n" * join(parts, "\n") * "\n</svg>\n"

"A scale from values low..high to pixels left..right."
struct Scale
    low::Float64
    high::Float64
    left::Float64
    right::Float64
end

(scale::Scale)(value) = scale.left + (value - scale.low) / (scale.high - scale.low) * (scale.right - scale.left)

"Round steps that split low..high into about `count` parts."
function ticks(low, high; count = 5)
    raw = (high - low) / count
    power = 10.0^floor(log10(raw))
    step = power * (raw / power < 1.5 ? 1 : raw / power < 3.5 ? 2 : raw / power < 7.5 ? 5 : 10)
    return [k * step for k in ceil(Int, low / step - 1e-9):floor(Int, high / step + 1e-9)]
end

clip(text, most) = length(text) > most ? first(text, most - 1) * "…" : text
