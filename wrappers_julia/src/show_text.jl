# Short readable tables for text/plain and text/html.

"A heading, rows of text under column names, and notes."
struct Page
    heading::String
    names::Vector{String}
    rows::Vector{Vector{String}}
    notes::Vector{String}
    total::Int # rows there are, of which `rows` shows the first
end

const ROWS_SHOWN = 20

shown_rows(table, most) = 1:min(length(first(table)), most)
rows_that_fit(io) = get(io, :limit, false) ? clamp(displaysize(io)[1] - 8, 5, ROWS_SHOWN) : ROWS_SHOWN

small_note(cells) = any(small, cells) ? [SMALL_NOTE] : String[]

function print_page(io, page)
    println(io, page.heading)
    grid = vcat([page.names], page.rows)
    widths = [maximum(textwidth(row[k]) for row in grid) for k in eachindex(page.names)]
    for row in grid
        println(io, "  ", rstrip(join([k == 1 ? pad_right(row[k], widths[k]) : pad_left(row[k], widths[k])
                                       for k in eachindex(row)], "  ")))
    end
    print(io, join(page_notes(page), "\n"))
end

pad_right(text, width) = text * " "^(width - textwidth(text))
pad_left(text, width) = " "^(width - textwidth(text)) * text

function page_notes(page)
    hidden = page.total - length(page.rows)
    more = hidden > 0 ? ["… $(grouped(hidden)) more rows; columns(x) has them all"] : String[]
    return ["  " * note for note in vcat(more, page.notes)]
end

Base.show(io::IO, ::MIME"text/plain", result::Result) = print_page(io, page(result, rows_that_fit(io)))
Base.show(io::IO, result::Result) = print(io, page(result, 1).heading)

# ---- One page per class ---------------------------------------------------------------------------

function page(st::Study, most)
    table = table_of(st)
    rows = [[starred(table.community[k], Cell(table.members[k], UNIQUE)), grouped(table.members[k]),
             grouped(table.links[k]), grouped(table.broadcasts[k]), grouped(table.gatherings[k]),
             @sprintf("%.1f", table.hears_mean[k]), grouped(table.hears_most[k]),
             share_text(table.turnout_observed[k])] for k in shown_rows(table, most)]
    names = ["community", "members", "links", "broadcasts", "gatherings", "hears (mean)", "(most)", "turnout seen"]
    notes = any(<(FEWEST_TO_SHARE), table.members) ? [SMALL_NOTE] : String[]
    heading = "Study of $(communities_text(length(table.community))), $(grouped(sum(table.members))) members"
    return Page(heading, names, rows, notes, length(table.community))
end

function page(eq::Equilibrium, most)
    table, cells = table_of(eq), cells_of(eq)
    rows = [equilibrium_row(table, cells, k) for k in shown_rows(table, most)]
    heading = "Equilibrium of $(communities_text(length(rows_of(table)))): $(verdict_line(table.verdict))"
    return Page(heading, ["community", "members", "turnout", "verdict"], rows, small_note(values(cells)),
                length(table.community))
end

rows_of(table) = first(table)

function equilibrium_row(table, cells, k)
    cell = cells[table.community[k]]
    turnout = interval_text(table.turnout_least[k], table.turnout_greatest[k], cell.verdict)
    verdict = answers(cell) ? string(cell.verdict) : string("not converged, still ", @sprintf("%.2g", table.width[k]), " wide")
    return [starred(table.community[k], cell), grouped(cell.members), turnout, verdict]
end

function page(found::Turnout, most)
    table, cells = table_of(found), getfield(found, :cells)
    keys_shown = filter(name -> haskey(table, name), (:given, :at_least))
    rows = [turnout_row(table, cells, keys_shown, k) for k in shown_rows(table, most)]
    names = vcat("community", [string(name) for name in replace_names(keys_shown)], "turnout", "sd",
                 haskey(table, :chance_least) ? ["chance"] : String[])
    verdicts = [cell.verdict for cell in values(cells)]
    return Page("Turnout in $(communities_text(length(cells))): $(verdict_line(verdicts))", names, rows,
                small_note(values(cells)), length(table.community))
end

replace_names(keys) = [key === :given ? "given obstacle" : "at least" for key in keys]

function turnout_row(table, cells, keys, k)
    cell = cells[table.community[k]]
    between(stem) = interval_text(table[Symbol(stem, "_least")][k], table[Symbol(stem, "_greatest")][k], cell.verdict)
    chance = haskey(table, :chance_least) ? [between("chance")] : String[]
    return vcat(starred(table.community[k], cell), [@sprintf("%.3g", table[key][k]) for key in keys],
                between("turnout"), between("sd"), chance)
end

function page(found::Sensitivity, most)
    table, cells = table_of(found), getfield(found, :cells)
    stems = filter(stem -> haskey(table, Symbol(stem, "_least")), (:cutoff, :chance, :turnout, :turnout_own, :status))
    keys_shown = filter(name -> haskey(table, name), (:member, :listener, :speaker, :parameter, :broadcast, :precision))
    rows = [sensitivity_row(table, cells, keys_shown, stems, k) for k in shown_rows(table, most)]
    names = vcat("community", [replace(string(name), '_' => ' ') for name in (keys_shown..., stems...)])
    heading = "Derivatives at $(communities_text(length(cells))): " * verdict_line([cell.verdict for cell in values(cells)])
    by_people = haskey(table, :member) || haskey(table, :listener)
    notes = by_people ? ["rows describe people: keep them private; they are no list of whom to press"] :
            small_note(values(cells))
    return Page(heading, names, rows, notes, length(table.community))
end

function sensitivity_row(table, cells, keys, stems, k)
    cell = cells[table.community[k]]
    ends(stem) = (table[Symbol(stem, "_least")][k], table[Symbol(stem, "_greatest")][k])
    text(stem) = stem === :status ? interval_text(ends(stem)..., BRACKETED, string) :
                 interval_text(ends(stem)..., cell.verdict, derivative_text)
    return vcat(starred(table.community[k], cell), [key_text(table[key][k]) for key in keys], [text(stem) for stem in stems])
end

derivative_text(value) = isnan(value) ? "-" : @sprintf("%+.3g", value)
key_text(value) = value === missing ? "" : value isa AbstractFloat ? @sprintf("%.3g", value) : string(value)

function page(plays::Simulation, most)
    table, cells = table_of(plays), getfield(plays, :cells)
    by_member = haskey(table, :member)
    rows = [by_member ? action_row(table, cells, k) : play_row(table, cells, k) for k in shown_rows(table, most)]
    names = by_member ? ["community", "member", "replication", "index", "acts"] :
            ["community", "replication", "obstacle", "turnout"]
    seed = record_of(plays).seed
    heading = "Simulated plays, seed $seed, of $(communities_text(length(cells))): " *
              verdict_line([cell.verdict for cell in values(cells)])
    notes = by_member ? ["rows describe people: keep them private"] : small_note(values(cells))
    return Page(heading, names, rows, notes, length(table.community))
end

function play_row(table, cells, k)
    cell = cells[table.community[k]]
    return [starred(table.community[k], cell), string(table.replication[k]), @sprintf("%.3f", table.obstacle[k]),
            interval_text(table.turnout_least[k], table.turnout_greatest[k], cell.verdict)]
end

function action_row(table, cells, k)
    cell = cells[table.community[k]]
    acts = interval_text(table.action_least[k], table.action_greatest[k], cell.verdict, string)
    return [starred(table.community[k], cell), string(table.member[k]), string(table.replication[k]),
            @sprintf("%.3f", table.index[k]), acts]
end

function page(cf::Counterfactual, most)
    table = table_of(cf)
    rows = [difference_row(table, k) for k in shown_rows(table, most)]
    names = ["community", "members", "baseline", "scenario", "difference", "5-95 % of plays", "verdicts"]
    notes = any(<(FEWEST_TO_SHARE), table.members) ? [SMALL_NOTE] : String[]
    return Page(counterfactual_heading(cf), names, rows, notes, length(table.scope))
end

function counterfactual_heading(cf)
    table, record = table_of(cf), record_of(cf)
    verdicts = [cell.verdict for cell in difference_cells(table)[2:end]]
    return "Counterfactual, scenario minus baseline (seed $(record.seed)), $(communities_text(length(verdicts))): " *
           verdict_line(verdicts)
end

"The weaker of two verdicts."
weaker(a, b) = VERDICTS[max(findfirst(==(a), VERDICTS), findfirst(==(b), VERDICTS))]

difference_cells(table) = [Cell(members, weaker(before, after)) for (members, before, after)
                           in zip(table.members, table.baseline_verdict, table.scenario_verdict)]

function difference_row(table, k)
    cell = Cell(table.members[k], weaker(table.baseline_verdict[k], table.scenario_verdict[k]))
    spread = isnan(table.spread_low[k]) ? "-" : interval_text(table.spread_low[k], table.spread_high[k], cell.verdict, signed_text)
    before, after = table.baseline_verdict[k], table.scenario_verdict[k]
    return [row_name(table, k, cell), grouped(cell.members),
            interval_text(table.baseline_least[k], table.baseline_greatest[k], before),
            interval_text(table.scenario_least[k], table.scenario_greatest[k], after),
            interval_text(table.difference_low[k], table.difference_high[k], cell.verdict, signed_text), spread,
            before === after ? string(before) : "$before, then $after"]
end

row_name(table, k, cell) = table.scope[k] === :pooled ? "all, pooled" : starred(table.community[k], cell)

# ---- Classes without a table ----------------------------------------------------------------------

value_text(values) = length(values) == 1 ? @sprintf("%.4g", values[1]) : "$(length(values)) values"
parameters_text(values) = join(["$name = $(value_text(values[name]))" for name in sort(collect(keys(values)))], ", ")

Base.show(io::IO, b::Beliefs) = print(io, "Beliefs: ", parameters_text(b.values))
Base.show(io::IO, payoff::SharePayoff) =
    print(io, "Share payoff: ", parameters_text(payoff.values), " (reach 0: community, 1: contacts)")

function Base.show(io::IO, sc::Scenario)
    print(io, "Scenario of ", sc.baseline, isempty(sc.edits) ? ": no edits" : ":")
    for (k, edit) in enumerate(sc.edits)
        print(io, "\n  ", k, ". ", in_words(edit))
    end
end
