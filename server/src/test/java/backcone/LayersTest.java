package backcone;

import static com.tngtech.archunit.lang.syntax.ArchRuleDefinition.noClasses;
import static com.tngtech.archunit.library.dependencies.SlicesRuleDefinition.slices;

import com.tngtech.archunit.core.domain.JavaClasses;
import com.tngtech.archunit.core.importer.ClassFileImporter;
import com.tngtech.archunit.core.importer.ImportOption;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import org.junit.jupiter.api.Test;

/** Who may see whom. A new arrow is a line here that somebody reviews. */
class LayersTest {
    private static final JavaClasses ALL = new ClassFileImporter()
            .withImportOption(new ImportOption.DoNotIncludeTests())
            .importPackages("backcone");

    /** Packages of the engine and what each may use besides itself. */
    private static final Map<String, List<String>> MAY = Map.ofEntries(
            Map.entry("text", List.of()),
            Map.entry("units", List.of()),
            Map.entry("numeric", List.of()),
            Map.entry("syntax", List.of("text")),
            Map.entry("diagnostics", List.of("text")),
            Map.entry("parse", List.of("text", "syntax", "diagnostics")),
            Map.entry("model", List.of("text", "syntax", "units", "diagnostics")),
            Map.entry("graph", List.of("text", "syntax", "units", "numeric", "diagnostics", "model")),
            Map.entry("eval", List.of("graph", "numeric")),
            Map.entry(
                    "answers", List.of("text", "syntax", "units", "numeric", "diagnostics", "model", "graph", "eval")),
            Map.entry("explain", List.of("text", "syntax", "units", "model", "graph", "eval", "answers")),
            Map.entry(
                    "editing",
                    List.of(
                            "text",
                            "syntax",
                            "units",
                            "diagnostics",
                            "parse",
                            "model",
                            "graph",
                            "eval",
                            "answers",
                            "explain")),
            Map.entry("review", List.of("text", "syntax", "units", "model", "graph", "eval", "answers")),
            Map.entry(
                    "fixes",
                    List.of("text", "syntax", "parse", "units", "diagnostics", "model", "graph", "eval", "answers")));

    @Test
    void enginePackagesSeeOnlyWhatIsListed() {
        for (Map.Entry<String, List<String>> e : MAY.entrySet()) {
            List<String> forbidden = new ArrayList<>();
            for (String p : MAY.keySet()) {
                if (!p.equals(e.getKey()) && !e.getValue().contains(p)) {
                    forbidden.add("backcone.engine." + p);
                }
            }
            forbidden.add("backcone.engine");
            forbidden.add("backcone.cli..");
            noClasses()
                    .that()
                    .resideInAPackage("backcone.engine." + e.getKey())
                    .should()
                    .dependOnClassesThat()
                    .resideInAnyPackage(forbidden.toArray(String[]::new))
                    .check(ALL);
        }
    }

    @Test
    void onlyParseSeesTheGrammar() {
        noClasses()
                .that()
                .resideInAPackage("backcone.engine..")
                .and()
                .resideOutsideOfPackage("backcone.engine.parse")
                .should()
                .dependOnClassesThat()
                .resideInAnyPackage("backcone.grammar..", "org.antlr..")
                .check(ALL);
    }

    @Test
    void theEngineDoesNoInputOrOutputAndReadsNoClock() {
        noClasses()
                .that()
                .resideInAPackage("backcone.engine..")
                .and()
                .resideOutsideOfPackage("backcone.engine.parse")
                .should()
                .dependOnClassesThat()
                .resideInAnyPackage(
                        "java.nio.file..", "java.net..", "java.util.logging..", "org.eclipse.lsp4j..", "picocli..")
                .check(ALL);
        noClasses()
                .that()
                .resideInAPackage("backcone.engine..")
                .should()
                .callMethod(java.time.LocalDate.class, "now")
                .check(ALL);
        noClasses()
                .that()
                .resideInAPackage("backcone.engine..")
                .should()
                .callMethod(System.class, "currentTimeMillis")
                .orShould()
                .callMethod(System.class, "nanoTime")
                .orShould()
                .accessField(System.class, "out")
                .orShould()
                .accessField(System.class, "err")
                .check(ALL);
    }

    @Test
    void theCommandLineNeverSeesTheLanguageServerLibrary() {
        noClasses()
                .that()
                .resideInAPackage("backcone.cli..")
                .should()
                .dependOnClassesThat()
                .resideInAnyPackage("org.eclipse.lsp4j..", "backcone.lsp..")
                .check(ALL);
    }

    @Test
    void packagesOfTheEngineHaveNoCycles() {
        slices().matching("backcone.engine.(*)..").should().beFreeOfCycles().check(ALL);
    }
}
