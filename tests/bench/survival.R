# R's side of the survival bench; JSON to standard output.   Rscript survival.R right N | interval N
# The data are those of survival-data.ts; the times are elapsed seconds, the median of the runs after one that warms up.
task <- commandArgs(TRUE)[1]
n <- as.integer(commandArgs(TRUE)[2])
uniforms <- function(seed, count) {
  x <- seed
  u <- numeric(count)
  for (i in seq_len(count)) {
    x <- (x * 16807) %% 2147483647
    u[i] <- x / 2147483647
  }
  u
}
elapsed <- function(work, runs) {
  work()
  median(vapply(seq_len(runs), function(i) {
    gc(FALSE)
    system.time(work())[["elapsed"]]
  }, 0))
}
at <- 3 * (seq_len(n) - 1)
if (task == "right") {
  suppressMessages(library(survival))
  u <- uniforms(20240611, 3 * n)
  g <- floor(10 * u[at + 1])
  failed <- 1 + floor((1200 + 60 * g) * (u[at + 2] * u[at + 2]))
  left <- 1 + floor(730 * u[at + 3])
  time <- pmin(failed, left)
  event <- as.integer(failed <= left)
  group <- factor(g)
  fit <- survfit(Surv(time, event) ~ group, conf.type = "log-log")
  year <- summary(fit, times = 365)
  cat(sprintf('{"check": [%.15g, %.15g], "seconds": %.6f}\n', sum(year$surv), sum(year$lower),
    elapsed(function() survfit(Surv(time, event) ~ group, conf.type = "log-log"), 5)))
} else {
  suppressMessages(library(npsurv))
  u <- uniforms(987654321, 3 * n)
  failed <- 1 + floor(1500 * (u[at + 1] * u[at + 1]))
  first <- 1 + floor(120 * u[at + 2])
  gap <- 20 + floor(160 * u[at + 3])
  k <- pmax(0, ceiling((failed - first) / gap))
  found <- first + k * gap
  censored <- found > 730
  lower <- ifelse(censored, first + floor((730 - first) / gap) * gap, ifelse(k == 0, 0, first + (k - 1) * gap))
  spans <- cbind(lower, ifelse(censored, Inf, found))
  fit <- npsurv(spans, tol = 1e-9, maxit = 1000)
  cat(sprintf('{"logLikelihood": %.12g, "gap": %.6g, "seconds": %.6f}\n', fit$ll, fit$maxgrad,
    elapsed(function() npsurv(spans, tol = 1e-9, maxit = 1000), 5)))
}
