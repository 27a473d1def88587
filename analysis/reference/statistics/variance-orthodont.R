# Expected values for variance-orthodont.json. Run in this folder: Rscript variance-orthodont.R
# R 4.2.2, nlme 3.1-162, car 3.1-1, jsonlite 1.8.4 (Debian 12).
# Data: nlme::Orthodont, table 1 of Potthoff and Roy 1964, Biometrika 51:313-326; the rows are in linear-mixed-model-orthodont.json.
suppressPackageStartupMessages({ library(car); library(jsonlite) })
d <- as.data.frame(nlme::Orthodont)
ids <- unique(as.character(d$Subject)); ages <- c(8, 10, 12, 14)
Y <- t(sapply(ids, function(s) d$distance[d$Subject == s])); sex <- factor(d$Sex[match(ids, d$Subject)], c("Male", "Female")); contrasts(sex) <- contr.sum(2)
idata <- data.frame(age = factor(ages)); contrasts(idata$age) <- contr.sum(4)
keys <- c("ss_effect", "df_effect", "ss_error", "df_error", "f", "p_value")
row <- function(u, t) setNames(as.list(unname(u$univariate.tests[t, c("Sum Sq", "num Df", "Error SS", "den Df", "F value", "Pr(>F)")])), keys)
eps <- function(u, t) list(mauchly_w = u$sphericity.tests[t, 1], gg_epsilon = u$pval.adjustments[t, "GG eps"], hf_epsilon = u$pval.adjustments[t, "HF eps"], p_gg = u$pval.adjustments[t, "Pr(>F[GG])"], p_hf = u$pval.adjustments[t, "Pr(>F[HF])"])
uni <- function(m) suppressWarnings(summary(Anova(m, idata = idata, idesign = ~age, type = 3), multivariate = FALSE))
m <- uni(lm(Y ~ sex)); o <- uni(lm(Y ~ 1))
pw <- combn(4, 2, simplify = FALSE); tests <- lapply(pw, function(p) t.test(Y[, p[1]], Y[, p[2]], paired = TRUE)); adj <- p.adjust(sapply(tests, `[[`, "p.value"), "bonferroni")
f <- data.frame(y = Y[, 4], b = Y[, 1] - mean(Y[, 1]), sex = factor(as.character(sex), levels(sex)))
a <- lm(y ~ b + sex, f); aa <- Anova(a, type = 2); h <- anova(a, lm(y ~ b * sex, f)); ci <- confint(a)
one <- lm(y ~ b, f); mb <- mean(Y[, 1]); c1 <- coef(summary(one))
out <- list(source = "Potthoff and Roy 1964, Biometrika 51:313-326; expected values from R 4.2.2 and car 3.1-1 by variance-orthodont.R",
  mixed_anova = list(sex = row(m, "sex"), age = c(row(m, "age"), eps(m, "age")), interaction = c(row(m, "sex:age"), eps(m, "sex:age"))),
  one_way_rm_anova = c(row(o, "age"), eps(o, "age")),
  pairwise = Map(function(t, q) list(mean_difference = unname(t$estimate), t = unname(t$statistic), p_value = t$p.value, p_adjusted = q, ci_lower = t$conf.int[1]), tests, adj),
  ancova_by_sex = list(group_f = aa["sex", "F value"], group_p = aa["sex", "Pr(>F)"], baseline_slope = coef(a)[["b"]], adjusted_difference = -coef(a)[["sexFemale"]], adjusted_difference_ci_lower = -ci["sexFemale", 2], residual_sd = sigma(a), r_squared = summary(a)$r.squared, slope_homogeneity_f = h$F[2], slope_homogeneity_p = h[2, "Pr(>F)"]),
  ancova = list(adjusted_mean_change = c1[1, 1] - mb, adjusted_mean_change_se = c1[1, 2], baseline_slope = c1[2, 1], baseline_slope_se = c1[2, 2], residual_sd = sigma(one)))
writeLines(toJSON(out, auto_unbox = TRUE, digits = 15), "variance-orthodont.json")
