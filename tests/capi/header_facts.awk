# Facts about folkmote.h, one per line: "lines N" counts the lines that are not blank, "doc N" those of them that carry
# documentation (an enumerator with its comment beside it does); "function NAME" every exported function in order;
# "bare NAME" a function with no comment above it; "constant NAME VALUE" a defined one.
# A comment covers the declarations below it up to the next blank line. Other declarations do not end it.

function note_function(line) {
  if (line !~ /^FOLKMOTE_API/) return
  match(line, /folkmote_[a-z_]+\(/)
  name = substr(line, RSTART, RLENGTH - 1)
  print "function", name
  if (!covered) print "bare", name
}

/[^ \t]/ { ++lines }
/^[ \t]*$/ { if (!inside) covered = 0; next }
inside { ++doc; if (/\*\//) inside = 0; next }
/^[ \t]*\/\*/ {
  ++doc
  # A section title documents nothing.
  if (!/\/\* ----/) covered = 1
  if (!/\*\//) inside = 1
  next
}
/\/\*.*\*\// { ++doc }
{ note_function($0) }
/^#define FOLKMOTE_[A-Z_]+ +["0-9]/ { gsub(/"/, "", $3); print "constant", $2, $3 }
END { print "doc", doc; print "lines", lines }
