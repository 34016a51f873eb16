# How numbers and verdicts read. Nothing here makes a result; it only rounds for reading.

share_text(value) = isnan(value) ? "-" : @sprintf("%.3f", value)
signed_text(value) = isnan(value) ? "-" : unsigned_zero(@sprintf("%+.3f", value))
percent_text(value) = @sprintf("%.0f %%", 100value)
points_text(value) = unsigned_zero(@sprintf("%+.1f", 100value))
whole_points_text(value) = value == 0 ? "0" : @sprintf("%+.3g", 100value)

"A change that reads as nought has no sign."
unsigned_zero(text) = all(in("+-0."), text) ? text[2:end] : text

"Least to greatest; one number where both read alike and there is one answer."
function interval_text(low, high, verdict, text = share_text)
    verdict === NOT_CONVERGED && return "no answer"
    text(low) == text(high) && verdict !== SEVERAL && return text(low)
    return string(text(low), " to ", text(high))
end

grouped(count) = replace(string(count), r"(?<=\d)(?=(\d{3})+$)" => ",")
communities_text(count) = count == 1 ? "1 community" : "$(grouped(count)) communities"

"How many communities have each verdict, those without an answer first."
function verdict_counts(verdicts)
    counts = [(verdict, count(==(verdict), verdicts)) for verdict in VERDICTS]
    return filter(pair -> pair[2] > 0, counts)
end

verdict_line(verdicts) = join(["$(grouped(count)) $verdict" for (verdict, count) in verdict_counts(verdicts)], ", ")

"A community's name, starred where it is too small to share."
starred(community, cell) = string(community, small(cell) ? " *" : "")

const SMALL_NOTE = "* fewer than $FEWEST_TO_SHARE members: not for sharing"
