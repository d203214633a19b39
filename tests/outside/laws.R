# laws.R TABLE: what R makes of the cases, as CSV, for laws.py. Needs nothing but R's own packages.
#   shares FILE: binom.test (Clopper-Pearson) and prop.test without continuity correction (Wilson)
#   fisher FILE: fisher.test of each table, and p.adjust of ours by Holm's method
#   kendall FILE: cor.test of each case's pairs
#   sunspots:    the months of the extrema of datasets::sunspot.month, 13-month smoothed
given <- commandArgs(trailingOnly = TRUE)

shares <- function(file) {
  cases <- read.csv(file)
  cat("wilson_low,wilson_high,exact_low,exact_high\n")
  for (k in seq_len(nrow(cases))) {
    x <- cases$x[k]; n <- cases$n[k]; level <- cases$level[k]
    w <- suppressWarnings(prop.test(x, n, conf.level = level, correct = FALSE))$conf.int
    e <- binom.test(x, n, conf.level = level)$conf.int
    cat(sprintf("%.17g,%.17g,%.17g,%.17g\n", w[1], w[2], e[1], e[2]))
  }
}

# months FILE: cycle, the month (from 1749-01, 1) of the table's minimum; prints the series' extrema about it.
sunspots <- function(file) {
  rows <- read.csv(file)
  series <- datasets::sunspot.month
  smooth <- as.numeric(stats::filter(series, c(0.5, rep(1, 11), 0.5) / 12))
  cat("version,values\n")
  cat(sprintf("%s.%s,%d\n", R.version$major, R.version$minor, length(series)))
  cat("number,minimum,maximum\n")
  for (k in seq_len(nrow(rows))) {
    near <- max(1, rows$month[k] - 30):min(length(smooth), rows$month[k] + 30)
    minimum <- if (rows$month[k] + 30 > length(smooth)) NA else near[which.min(smooth[near])]
    maximum <- NA
    if (k < nrow(rows) && rows$month[k + 1] <= length(smooth)) {
      span <- rows$month[k]:rows$month[k + 1]
      maximum <- span[which.max(smooth[span])]
    }
    cat(sprintf("%d,%s,%s\n", rows$number[k], minimum, maximum))
  }
}

fisher <- function(file) {
  cases <- read.csv(file)
  cat("p,holm\n")
  holm <- p.adjust(cases$p, "holm")
  for (k in seq_len(nrow(cases))) {
    p <- fisher.test(matrix(c(cases$a[k], cases$c[k], cases$b[k], cases$d[k]), 2), conf.int = FALSE)$p.value
    cat(sprintf("%.17g,%.17g\n", p, holm[k]))
  }
}

kendall <- function(file) {
  cases <- read.csv(file)
  cat("tau,p\n")
  for (c in unique(cases$case)) {
    part <- cases[cases$case == c, ]
    tied <- anyDuplicated(part$x) || anyDuplicated(part$y)
    test <- suppressWarnings(cor.test(part$x, part$y, method = "kendall", exact = !tied, continuity = FALSE))
    cat(sprintf("%.17g,%.17g\n", test$estimate, test$p.value))
  }
}

switch(given[1], shares = shares(given[2]), sunspots = sunspots(given[2]), fisher = fisher(given[2]),
       kendall = kendall(given[2]))
