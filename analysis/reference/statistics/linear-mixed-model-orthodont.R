# Expected values for linear-mixed-model-orthodont.json. Run in this folder: Rscript linear-mixed-model-orthodont.R
# R 4.2.2, nlme 3.1-162, lme4 1.1-31, lmerTest 3.1-3, pbkrtest 0.5.2, emmeans 1.8.4-1, jsonlite 1.8.4 (Debian 12).
# Data: nlme::Orthodont, table 1 of Potthoff and Roy 1964, Biometrika 51:313-326 (27 children at ages 8, 10, 12, 14).
suppressPackageStartupMessages({ library(lme4); library(lmerTest); library(emmeans); library(jsonlite) })
d <- as.data.frame(nlme::Orthodont)
d <- data.frame(subject = as.character(d$Subject), sex = as.character(d$Sex), age = d$age, value = d$distance)
d$sex <- factor(d$sex, unique(d$sex)); d$subject <- factor(d$subject, unique(d$subject)); d$visit <- factor(d$age)
# unbalanced version: six cells emptied
gone <- c(3, 17, 42, 43, 80, 101); u <- d; u$value[gone] <- NA
tight <- lmerControl(optimizer = "bobyqa", optCtrl = list(rhobeg = 0.1, rhoend = 1e-10, maxfun = 1e5), calc.derivs = FALSE, check.conv.singular = "ignore")
plan <- function(...) c(list(method = "linear_mixed_model", outcome = "value", subject = "subject"), list(...))
case <- function(name, data, formula, plan, factor = NULL, ddf = "Satterthwaite", REML = TRUE) {
  m <- lmer(formula, data, REML = REML, control = tight)
  vc <- as.data.frame(VarCorr(m)); cf <- coef(summary(m, ddf = ddf)); an <- anova(m, ddf = ddf)
  pick <- function(one, two) vc$vcov[vc$grp != "Residual" & vc$var1 %in% one & vc$var2 %in% two]
  est <- list(n_observations = nobs(m), log_likelihood = as.numeric(logLik(m)), subject_variance = pick("(Intercept)", NA), residual_variance = sigma(m)^2)
  if ("age" %in% vc$var1) est$slope_variance <- pick("age", NA)
  if ("age" %in% vc$var2) est$intercept_slope_covariance <- pick("(Intercept)", "age")
  rows <- function(x, keys) lapply(seq_len(nrow(x)), function(i) setNames(as.list(as.numeric(x[i, ])), keys))
  tables <- list(fixed_effects = rows(cf, c("estimate", "standard_error", "df", "t", "p_value")),
                 anova = rows(as.data.frame(an)[, c("NumDF", "DenDF", "F value", "Pr(>F)")], c("df_1", "df_2", "f", "p_value")))
  if (!is.null(factor)) {
    emm_options(lmer.df = if (ddf == "Kenward-Roger") "kenward-roger" else "satterthwaite")
    e <- emmeans(m, factor); s <- as.data.frame(e); q <- as.data.frame(summary(pairs(e), adjust = "holm"))
    tables$marginal_means <- rows(s[, c("emmean", "SE", "df", "lower.CL", "upper.CL")], c("adjusted_mean", "standard_error", "df", "ci_lower", "ci_upper"))
    tables$contrasts <- rows(q[, c("estimate", "SE", "df", "t.ratio", "p.value")], c("estimate", "standard_error", "df", "t", "p_adjusted"))
  }
  list(name = name, data = if (identical(data, u)) "six_missing" else "complete", plan = plan, estimates = est, tables = tables)
}
sa <- list("sex", "age", list("sex", "age")); cases <- list(
  case("random intercept", d, value ~ sex * age + (1 | subject), plan(fixed = sa, factors = list("sex"), marginal_means = list(factor = "sex")), "sex"),
  case("correlated slope", d, value ~ sex * age + (1 + age | subject), plan(fixed = sa, factors = list("sex"), random = list(slopes = list("age")))),
  case("uncorrelated slope, maximum likelihood", d, value ~ sex * age + (1 + age || subject), plan(fixed = sa, factors = list("sex"), estimation = "ML", random = list(slopes = list("age"), correlated = FALSE)), REML = FALSE),
  case("unbalanced, factor of four levels", u, value ~ sex + visit + (1 | subject), plan(fixed = list("sex", "visit"), factors = list("sex", "visit"), marginal_means = list(factor = "visit")), "visit"),
  case("unbalanced, one factor", u, value ~ visit + (1 | subject), plan(fixed = list("visit"), factors = list("visit"))),
  case("unbalanced, Kenward and Roger", u, value ~ sex * age + (1 + age | subject), plan(fixed = sa, factors = list("sex"), df_method = "kenward_roger", random = list(slopes = list("age")), marginal_means = list(factor = "sex")), "sex", "Kenward-Roger"),
  case("unbalanced, Kenward and Roger, factor", u, value ~ visit + (1 | subject), plan(fixed = list("visit"), factors = list("visit"), df_method = "kenward_roger", marginal_means = list(factor = "visit")), "visit", "Kenward-Roger"))
out <- list(source = "Potthoff and Roy 1964, Biometrika 51:313-326, table 1, as nlme::Orthodont (nlme 3.1-162); expected values from R 4.2.2 by linear-mixed-model-orthodont.R",
            six_missing = gone + 1, rows = lapply(seq_len(nrow(d)), function(i) list(as.character(d$subject[i]), as.character(d$sex[i]), d$age[i], d$value[i])), cases = cases)
writeLines(toJSON(out, auto_unbox = TRUE, digits = 15), "linear-mixed-model-orthodont.json")
