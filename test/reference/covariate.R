# Adjusted contrasts for test/stats on R's own data. Made with R 4.2.2 and MASS 7.3-58.2:
#   Rscript test/reference/covariate.R > test/reference/covariate.json
# theta by lm() on values about their arm's mean, weighted by 1 / (n (n - 1)): that minimises var_t / n_t + var_c / n_c of
# y - theta x. The interval's parts by t.test on y - theta (x - X). `regression` is lm(y ~ arm + x): with arms of one size
# its slope and its difference must be the same; `interacted` is lm(y ~ arm * (x - X)): its difference is the same where x
# has one variance in both arms.
suppressMessages(library(MASS))

text <- function(x) ifelse(is.na(x), "null", sprintf("\"%.15g\"", x))
listed <- function(x) paste0("[", paste(x, collapse = ", "), "]")
holes <- function(x) listed(ifelse(is.na(x), "null", x))
named <- function(...) { x <- list(...); paste0("{", paste0("\"", names(x), "\": ", unlist(x), collapse = ", "), "}") }

pair <- function(name, yc, xc, yt, xt) {
  given <- list(control = xc, variant = xt)
  X <- mean(c(xc, xt), na.rm = TRUE)
  xc[is.na(xc)] <- X
  xt[is.na(xt)] <- X
  about <- function(v) v - mean(v)
  n <- rep(c(length(yc), length(yt)), c(length(yc), length(yt)))
  theta <- unname(coef(lm(c(about(yc), about(yt)) ~ 0 + c(about(xc), about(xt)), weights = 1 / (n * (n - 1)))))
  ac <- yc - theta * (xc - X)
  at <- yt - theta * (xt - X)
  test <- t.test(at, ac)
  plain <- t.test(yt, yc)
  y <- c(yc, yt); x <- c(xc, xt); arm <- rep(0:1, c(length(yc), length(yt)))
  one <- coef(lm(y ~ arm + x)); two <- coef(lm(y ~ arm * I(x - X)))
  seen <- t.test(given$variant, given$control)
  named(
    name = paste0("\"", name, "\""), control = named(y = listed(yc), x = holes(given$control)),
    variant = named(y = listed(yt), x = holes(given$variant)), theta = text(theta), centre = text(X),
    levelControl = text(mean(ac)), levelVariant = text(mean(at)), standardError = text(test$stderr), t = text(test$statistic),
    df = text(test$parameter), varianceReduction = text(1 - test$stderr^2 / plain$stderr^2),
    regression = named(slope = text(one["x"]), difference = text(one["arm"])), interacted = text(two["arm"]),
    balance = named(difference = text(unname(diff(rev(seen$estimate)))), t = text(seen$statistic), p = text(seen$p.value),
      standardised = text(unname(diff(rev(seen$estimate))) /
        sqrt((var(given$control, na.rm = TRUE) + var(given$variant, na.rm = TRUE)) / 2)))
  )
}
flowers <- split(iris, iris$Species)
teeth <- split(ToothGrowth, ToothGrowth$supp)
girls <- split(anorexia, anorexia$Treat)
air <- split(airquality, airquality$Month)
cars <- split(mtcars, mtcars$am)
cat("[\n", paste(c(
  pair("iris, versicolor against setosa", flowers$setosa$Sepal.Length, flowers$setosa$Sepal.Width, flowers$versicolor$Sepal.Length, flowers$versicolor$Sepal.Width),
  pair("ToothGrowth, VC against OJ by dose", teeth$OJ$len, teeth$OJ$dose, teeth$VC$len, teeth$VC$dose),
  pair("anorexia, CBT against Cont by weight before", girls$Cont$Postwt, girls$Cont$Prewt, girls$CBT$Postwt, girls$CBT$Prewt),
  pair("anorexia, FT against Cont by weight before", girls$Cont$Postwt, girls$Cont$Prewt, girls$FT$Postwt, girls$FT$Prewt),
  pair("airquality, August against May by ozone, some missing", air$`5`$Temp, air$`5`$Ozone, air$`8`$Temp, air$`8`$Ozone),
  pair("mtcars, a share: engine shape by weight", cars$`0`$vs, cars$`0`$wt, cars$`1`$vs, cars$`1`$wt)
), collapse = ",\n"), "\n]\n", sep = "")
