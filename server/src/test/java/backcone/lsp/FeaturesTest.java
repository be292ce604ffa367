package backcone.lsp;

import static org.assertj.core.api.Assertions.assertThat;

import com.google.gson.JsonArray;
import com.google.gson.JsonElement;
import com.google.gson.JsonObject;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.stream.Stream;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** What an editor asks on real samples, over the wire. */
class FeaturesTest {
    private static final Path SAMPLES =
            Path.of("..", "samples").toAbsolutePath().normalize();

    @TempDir
    Path dir;

    private Session s = new Session();
    private Path spec = Path.of("");
    private String uri = "";
    private String text = "";

    @BeforeEach
    void aFolderOfSamples() throws IOException {
        Files.createDirectories(dir.resolve("library"));
        try (Stream<Path> all = Files.walk(SAMPLES, 2)) {
            for (Path p : all.filter(p -> p.toString().endsWith(".drive")).toList()) {
                Path to = dir.resolve(SAMPLES.relativize(p).toString());
                if (!to.toString().contains("broken")
                        && Files.isDirectory(dir.resolve(SAMPLES.relativize(p)).resolveSibling(""))) {
                    Files.copy(p, to);
                }
            }
        }
        spec = dir.resolve("clinker_elevator.drive");
        uri = Uris.uri(spec);
        text = Files.readString(spec);
        s.ask(
                "initialize",
                "{\"rootUri\":" + Session.quoted(Uris.uri(dir))
                        + ",\"capabilities\":{\"workspace\":{\"workspaceEdit\":{\"documentChanges\":true}},\"textDocument\":{"
                        + "\"publishDiagnostics\":{\"versionSupport\":true,\"relatedInformation\":true}}}}");
        s.open(uri, text);
        s.diagnostics(uri, 1);
    }

    @AfterEach
    void end() {
        s.close();
    }

    private String at(String word, int plus) {
        int i = text.indexOf(word) + plus;
        String before = text.substring(0, i);
        int line = (int) before.chars().filter(c -> c == '\n').count();
        return Session.at(uri, line, i - (before.lastIndexOf('\n') + 1));
    }

    private String doc() {
        return "{\"textDocument\":{\"uri\":" + Session.quoted(uri) + "}}";
    }

    @Test
    void hoverTellsValueEquationSourceAndMargin() {
        String h = s.ask("textDocument/hover", at("pitting >= 1.20", 2)).toString();
        assertThat(h)
                .contains(
                        "safety factor against pitting",
                        "sigma_HG / sigma_H",
                        "margin",
                        "iso_6336_b",
                        "1 % more of these",
                        "output.normal_module");
        assertThat(s.ask("textDocument/hover", at("helix_angle", 3)).toString()).contains("12 deg", "rad");
        assertThat(s.ask("textDocument/hover", at("= 45 kW", 6)).toString()).contains("kilowatt");
        assertThat(s.ask("textDocument/hover", at("rate input", 1)).toString()).contains("rates a mesh");
    }

    @Test
    void definitionsLeadIntoLibrariesAndTheHandbook() throws IOException {
        JsonObject material = s.ask("textDocument/definition", at("= steel_18CrNiMo7_6", 5))
                .getAsJsonArray()
                .get(0)
                .getAsJsonObject();
        assertThat(material.get("uri").getAsString()).endsWith("library/case-hardening-steels.drive");
        JsonObject property = s.ask("textDocument/definition", at("helix_angle", 3))
                .getAsJsonArray()
                .get(0)
                .getAsJsonObject();
        Path book = Uris.path(property.get("uri").getAsString());
        assertThat(book).isNotNull();
        assertThat(Files.readString(book)).contains("helix angle at the reference cylinder");
    }

    @Test
    void aMaterialOfTheLibraryIsRenamedInEveryFileThatUsesIt() {
        String other = Uris.uri(dir.resolve("beet_washer.drive"));
        s.note("initialized", "{}");
        s.heard(
                "textDocument/publishDiagnostics",
                p -> p.get("uri").getAsString().equals(other));
        JsonElement edit = s.ask(
                "textDocument/rename",
                at("= steel_18CrNiMo7_6", 5).replaceFirst("\\}$", ",\"newName\":\"hard_steel\"}"));
        assertThat(edit.toString())
                .contains("case-hardening-steels.drive", "clinker_elevator.drive", "beet_washer.drive");
        assertThat(s.error("textDocument/rename", at("helix_angle", 3).replaceFirst("\\}$", ",\"newName\":\"x\"}")))
                .isNegative();
    }

    @Test
    void hintsStandBesideRequirementsAndFacts() {
        String all = doc().replaceFirst(
                        "\\}$",
                        ",\"range\":{\"start\":{\"line\":0,\"character\":0},\"end\":{\"line\":400,\"character\":0}}}");
        JsonArray hints = s.ask("textDocument/inlayHint", all).getAsJsonArray();
        assertThat(hints.toString()).contains("1.095", "short", "load \u00D70.79", "rpm");
        for (JsonElement h : hints) {
            assertThat(h.getAsJsonObject().get("label").getAsString().length()).isLessThanOrEqualTo(43);
        }
        JsonObject first = hints.get(0).getAsJsonObject();
        assertThat(s.ask("inlayHint/resolve", first.toString()).toString()).contains("tooltip");
        assertThat(s.ask("textDocument/codeLens", doc()).toString()).contains("2 short", "governing");
    }

    @Test
    void aFixThatComputesIsOfferedWhereSomethingIsShort() {
        String range =
                at("pitting >= 1.20", 2).replaceFirst(".*\"position\":(\\{.*?\\})\\}$", "{\"start\":$1,\"end\":$1}");
        JsonArray actions = s.ask(
                        "textDocument/codeAction",
                        doc().replaceFirst("\\}$", ",\"range\":" + range + ",\"context\":{\"diagnostics\":[]}}"))
                .getAsJsonArray();
        assertThat(actions.toString()).contains("margin +", "accept");
        JsonObject last = actions.get(actions.size() - 1).getAsJsonObject();
        assertThat(last.has("isPreferred")).isFalse();
    }

    @Test
    void structureColoursAndLayout() {
        assertThat(s.ask("textDocument/documentSymbol", doc()).toString())
                .contains("clinker_elevator", "output", "rate input");
        assertThat(s.ask("textDocument/foldingRange", doc()).getAsJsonArray().size())
                .isGreaterThan(10);
        JsonObject tokens = s.ask("textDocument/semanticTokens/full", doc()).getAsJsonObject();
        assertThat(tokens.getAsJsonArray("data").size() % 5).isZero();
        s.change(uri, 2, 0, 0, 0, "#\n");
        JsonObject delta = s.ask(
                        "textDocument/semanticTokens/full/delta",
                        doc().replaceFirst("\\}$", ",\"previousResultId\":" + tokens.get("resultId") + "}"))
                .getAsJsonObject();
        assertThat(delta.has("edits")).isTrue();
        assertThat(s.ask(
                                "textDocument/formatting",
                                doc().replaceFirst("\\}$", ",\"options\":{\"tabSize\":2,\"insertSpaces\":true}}"))
                        .getAsJsonArray())
                .isEmpty();
        assertThat(s.ask(
                                "textDocument/selectionRange",
                                doc().replaceFirst("\\}$", ",\"positions\":[{\"line\":40,\"character\":8}]}"))
                        .toString())
                .contains("parent");
        assertThat(s.ask("textDocument/documentLink", doc()).toString()).contains("case-hardening-steels.drive");
    }

    @Test
    void completionKnowsWhatIsMissingAndTheUnits() {
        String sludge = Uris.uri(dir.resolve("sludge_mixer.drive"));
        s.open(
                sludge,
                "drive a {\n  shaft m { speed = 900  }\n  shaft n\n  bevel head {\n    tooth_form = \n    pinion on m { }\n    wheel on \n  }\n}\n");
        JsonElement units = s.ask("textDocument/completion", Session.at(sludge, 1, 24));
        assertThat(units.toString()).contains("\"rpm\"", "\"rad/s\"");
        assertThat(s.ask("textDocument/completion", Session.at(sludge, 4, 17)).toString())
                .contains("straight", "zerol", "spiral");
        assertThat(s.ask("textDocument/completion", Session.at(sludge, 6, 13)).toString())
                .contains("\"m\"", "\"n\"");
        assertThat(s.ask("textDocument/completion", Session.at(sludge, 3, 14)).toString())
                .isNotEmpty();
    }

    @Test
    void whatAValueIsComputedFromAndUsedIn() {
        JsonArray items =
                s.ask("textDocument/prepareCallHierarchy", at("helix_angle", 3)).getAsJsonArray();
        JsonElement users = s.ask("callHierarchy/incomingCalls", "{\"item\":" + items.get(0) + "}");
        assertThat(users.toString()).contains("output.transverse_module");
        JsonArray check = s.ask("textDocument/prepareCallHierarchy", at("pitting >= 1.20", 2))
                .getAsJsonArray();
        JsonElement from = s.ask("callHierarchy/outgoingCalls", "{\"item\":" + check.get(0) + "}");
        assertThat(from.toString()).contains("contact_stress");
    }

    @Test
    void aHouseFileChangesASeverity() throws IOException {
        Files.writeString(dir.resolve("house.severities"), "BC5001 warning because \"trial folder\"\n");
        s.note(
                "workspace/didChangeWatchedFiles",
                "{\"changes\":[{\"uri\":" + Session.quoted(Uris.uri(dir.resolve("house.severities")))
                        + ",\"type\":1}]}");
        JsonObject d = s.heard(
                "textDocument/publishDiagnostics",
                p -> p.get("uri").getAsString().equals(uri)
                        && p.toString().contains("\"severity\":2,\"code\":\"BC5001\""));
        assertThat(d).isNotNull();
    }

    @Test
    void aChangedLibraryIsFeltInTheSpecsThatUseIt() throws IOException {
        Path library = dir.resolve("library").resolve("case-hardening-steels.drive");
        Files.writeString(library, Files.readString(library).replace("MQ ", "ML "));
        s.note(
                "workspace/didChangeWatchedFiles",
                "{\"changes\":[{\"uri\":" + Session.quoted(Uris.uri(library)) + ",\"type\":2}]}");
        JsonObject d = s.heard(
                "textDocument/publishDiagnostics",
                p -> p.get("uri").getAsString().equals(uri) && p.toString().contains("bending"));
        assertThat(d.toString()).contains("input.iso_10300_b1.pinion.bending");
    }
}
