#!/usr/bin/env Rscript
# Golden values from R for the tests of the engine: local lines, prediction bands, medians, scale, straight lines, orthogonal
# polynomials, hinges at given knots and the segmented fit.   Rscript golden.R   (after golden.py, which writes series.csv)
# Debian: r-base-core r-cran-segmented. Every file says in its first line which program and version made it.
suppressPackageStartupMessages(library(segmented))
here <- sub("^--file=", "", grep("^--file=", commandArgs(FALSE), value = TRUE))
setwd(dirname(normalizePath(here)))
s <- read.csv("series.csv", comment.char = "#")
r <- R.version; R <- paste0("R ", r$major, ".", r$minor)
save <- function(name, how, frame) {
  con <- file(name, "w"); on.exit(close(con))
  writeLines(c(paste0("# ", R, ", ", how), paste(names(frame), collapse = ",")), con)
  writeLines(do.call(paste, c(lapply(frame, function(v) sprintf("%.15g", v)), sep = ",")), con)
}

# Local line of +-45 s at each breath.
local <- sapply(s$mid_s, function(t) {
  near <- abs(s$mid_s - t) <= 45; u <- s$mid_s[near] - t
  unname(coef(lm(s$x[near] ~ u))[1])
})
save("local-line-r.csv", "lm per window of +-45 s", data.frame(value = local))

# Distance of each breath from the line through its neighbours within +-45 s (at most 40 a side, itself left out), over
# 1.4826 x the median absolute residual of those neighbours x sqrt(1 + 1/n); two passes, the second without the first's flags.
band <- function(skip) sapply(seq_along(s$x), function(i) {
  at <- which(abs(s$mid_s - s$mid_s[i]) <= 45 & abs(seq_along(s$x) - i) <= 40 & seq_along(s$x) != i & !skip)
  u <- s$mid_s[at] - s$mid_s[i]; fit <- lm(s$x[at] ~ u)
  (s$x[i] - coef(fit)[1]) / (mad(resid(fit), center = 0) * sqrt(1 + 1 / length(at)))
})
first <- unname(band(rep(FALSE, nrow(s)))); second <- unname(band(abs(first) > 4))
save("bands-r.csv", "lm leaving one out, mad(center = 0)", data.frame(first = first, second = second))

# Medians and scale.
sizes <- c(5, 6, 31, 100, nrow(s))
save("scale-r.csv", "median(x[1:n]) and mad(x[1:n] - 1000, center = 0)", data.frame(n = sizes,
  median = sapply(sizes, function(n) median(s$x[1:n])), scale = sapply(sizes, function(n) mad(s$x[1:n] - 1000, center = 0))))

# Straight lines over the first n breaths, and the residual of polynomials in time over all.
lines <- lapply(c(3, 20, nrow(s)), function(n) { f <- lm(y ~ x, data = s[1:n, ])
  c(n, coef(f)[2], coef(f)[1], summary(f)$r.squared, sum((s$x[1:n] - mean(s$x[1:n]))^2)) })
lines <- as.data.frame(do.call(rbind, lines)); names(lines) <- c("n", "slope", "intercept", "r_squared", "sxx")
save("lines-r.csv", "lm, summary.lm", lines)
save("polynomial-r.csv", "resid(lm(y ~ poly(mid_s, degree)))", data.frame(
  degree1 = resid(lm(y ~ poly(mid_s, 1), data = s)), degree3 = resid(lm(y ~ poly(mid_s, 3), data = s))))

# Hinge y = a + b x + c (x - k)+ at given knots, weighted and not, on the level so that x is sorted.
knots <- c(s$level[c(25, 60, 95, 150)], 1500, 1777.7)
hinge <- function(k, by) { s$by <- by
  f <- lm(y ~ level + pmax(level - k, 0), data = s, weights = by); line <- lm(y ~ level, data = s, weights = by)
  c(k, coef(f)[2], coef(f)[3], sum(by * resid(line)^2) - sum(by * resid(f)^2), sum(by * resid(f)^2)) }
frame <- function(by) { m <- as.data.frame(t(sapply(knots, hinge, by = by)))
  names(m) <- c("knot", "before", "change", "gain", "rss"); m }
save("hinge-r.csv", "lm(y ~ level + pmax(level - k, 0))", frame(rep(1, nrow(s))))
save("hinge-weighted-r.csv", "the same with weights w", frame(s$w))

# The continuous two-segment fit with a free knot (clear break: 50 bootstrap restarts, tight tolerance).
set.seed(1)
seg <- segmented(lm(clear ~ level, data = s), seg.Z = ~level, psi = 1500,
                 control = seg.control(n.boot = 50, tol = 1e-10, it.max = 500, seed = 1))
before <- unname(coef(seg)["level"])
save("segmented-r.csv", paste0("segmented ", packageVersion("segmented"), ", n.boot = 50, tol = 1e-10"),
     data.frame(knot = seg$psi[1, 2], before = before, after = before + unname(coef(seg)["U1.level"]), rss = sum(resid(seg)^2)))
