# Rebuilds the figure "share of the possible hours each zone reached" from hours.csv.
#
#     Rscript league.R hours.csv league.csv league.pdf
#
# Needs R alone (Debian: r-base-core). Rows of rooms for few people are days or
# weeks instead of hours; sums do not mind.
args <- commandArgs(trailingOnly = TRUE)
columns <- c("achieved_h", "missed_h", "unjudged_suited_h", "suited_unknown_h", "occupied_unknown_h")
head <- names(read.csv(args[1], fileEncoding = "UTF-8-BOM", nrows = 1, check.names = FALSE))
kinds <- ifelse(head %in% columns, "numeric", ifelse(head == "zone", "character", "NULL"))
hours <- read.csv(args[1], fileEncoding = "UTF-8-BOM", colClasses = kinds)
zones <- aggregate(hours[columns], by = hours["zone"], FUN = sum)

possible <- zones$achieved_h + zones$missed_h
unknown <- zones$unjudged_suited_h + zones$suited_unknown_h + zones$occupied_unknown_h
league <- data.frame(
  zone = zones$zone,
  share = zones$achieved_h / possible,                        # NaN without possible hours
  low = zones$achieved_h / (possible + unknown),              # every unknown hour missed
  high = (zones$achieved_h + unknown) / (possible + unknown), # every unknown hour achieved
  possible_h = possible)
league <- league[league$possible_h > 0, ]
league <- league[order(league$share), ]
write.csv(league, args[2], row.names = FALSE)

pdf(args[3], width = 6.7, height = 1 + 0.25 * nrow(league))
par(mar = c(4, 6, 0.5, 0.5), las = 1)
rows <- seq_len(nrow(league))
plot(100 * league$share, rows, xlim = c(0, 100), yaxt = "n", pch = 19, col = "#00508a",
     xlab = "achieved share of the hours that could have been open (%)", ylab = "")
segments(100 * league$low, rows, 100 * league$high, rows, col = "grey30")
axis(2, at = rows, labels = league$zone)
invisible(dev.off())
