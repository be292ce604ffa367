package backcone.lsp;

import static org.assertj.core.api.Assertions.assertThat;

import com.google.gson.JsonObject;
import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import org.junit.jupiter.api.Test;

/** Whatever a client does, the right error or answer comes, and the server goes on. */
class RobustTest {
    private static final String URI = "untitled:a.drive";
    private static final String SPEC =
            "drive a \"A\" {\n  case rated {\n    power = 3 kW\n  }\n  shaft motor { speed = 900 rpm }\n}\n";

    private static void alive(Session s) {
        assertThat(s.ask("textDocument/hover", Session.at(URI, 4, 18))).isNotNull();
    }

    @Test
    void requestsBeforeInitializeAndAfterShutdownAreRefused() {
        try (Session s = new Session()) {
            assertThat(s.error("textDocument/hover", "{}")).isEqualTo(-32002);
            s.initialized();
            assertThat(s.error("initialize", "{\"capabilities\":{}}")).isEqualTo(-32600);
            s.open(URI, SPEC);
            alive(s);
            assertThat(s.ask("shutdown", "null").isJsonNull()).isTrue();
            assertThat(s.error("textDocument/hover", Session.at(URI, 0, 0))).isEqualTo(-32600);
            s.note("exit", "null");
            assertThat(s.end()).isZero();
        }
    }

    @Test
    void exitWithoutShutdownAndTheEndOfTheStreamAreNoGoodEnds() {
        try (Session s = new Session()) {
            s.initialized();
            s.note("exit", "null");
            assertThat(s.end()).isEqualTo(1);
        }
        Session t = new Session();
        t.initialized();
        t.close();
        assertThat(t.end()).isEqualTo(1);
    }

    @Test
    void unknownMethodsAndWrongParametersGetTheirErrors() {
        try (Session s = new Session()) {
            s.initialized();
            s.open(URI, SPEC);
            assertThat(s.error("backcone/nothing", "{}")).isEqualTo(-32601);
            assertThat(s.error("$/nothing", "{}")).isEqualTo(-32601);
            s.note("backcone/nothing", "{}");
            s.note("$/nothing", "{}");
            JsonObject wrong = s.answer(s.begin("textDocument/hover", "{\"textDocument\":{\"uri\":3}}"));
            assertThat(wrong.has("error") || wrong.get("result").isJsonNull()).isTrue();
            s.answer(s.begin("textDocument/hover", "[1,2]"));
            s.answer(
                    s.begin(
                            "textDocument/completion",
                            "{\"textDocument\":{\"uri\":\"file:///no/such.drive\"},\"position\":{\"line\":0,\"character\":0}}"));
            alive(s);
        }
    }

    @Test
    void brokenMessagesDoNotMakeItDeaf() {
        try (Session s = new Session()) {
            s.initialized();
            s.open(URI, SPEC);
            s.send("{\"jsonrpc\":");
            s.send("[1,2,3]");
            s.send("\"text\"");
            s.send("{\"jsonrpc\":\"2.0\"}");
            alive(s);
            s.send("{\"x\":" + "[".repeat(20_000));
            s.send("{\"jsonrpc\":\"2.0\",\"method\":\"textDocument/didChange\",\"params\":{\"a\":\""
                    + "x".repeat(40_000));
            alive(s);
            s.raw("garbage that is no header\r\n\r\n");
            s.raw("content-LENGTH:   2\r\nContent-Type: x\r\n\r\n{}");
            alive(s);
            String ok =
                    "{\"jsonrpc\":\"2.0\",\"id\":\"small\",\"method\":\"workspace/symbol\",\"params\":{\"query\":\"\"}}";
            s.raw("Content-Length: " + (ok.length() - 9) + "\r\n\r\n" + ok);
            alive(s);
            String note = "{\"jsonrpc\":\"2.0\",\"method\":\"$/x\"}";
            s.raw("Content-Length: " + (note.length() + 25) + "\r\n\r\n" + note);
            alive(s);
        }
    }

    @Test
    void editsOutOfRangeAreTakenToTheNearestPlace() {
        try (Session s = new Session()) {
            s.initialized();
            s.open(URI, SPEC);
            s.change(URI, 2, 9999, 5, 7, "# end\n");
            s.diagnostics(URI, 2);
            s.change(URI, 3, 2, 9000, 9999, " # far");
            s.diagnostics(URI, 3);
            s.note(
                    "textDocument/didChange",
                    "{\"textDocument\":{\"uri\":\"" + URI
                            + "\",\"version\":4},\"contentChanges\":[{\"range\":{\"start\":{\"line\":3,\"character\":0},\"end\":{\"line\":1,\"character\":0}},\"text\":\"\"}]}");
            s.diagnostics(URI, 4);
            s.note(
                    "textDocument/didChange",
                    "{\"textDocument\":{\"uri\":\"untitled:other.drive\",\"version\":2},\"contentChanges\":[{\"text\":\"x\"}]}");
            s.note("textDocument/didClose", "{\"textDocument\":{\"uri\":\"untitled:other.drive\"}}");
            alive(s);
        }
    }

    @Test
    void settingsThatSayNothingSwitchNothingOff() {
        try (Session s = new Session()) {
            s.initialized();
            s.open(URI, SPEC);
            s.note("workspace/didChangeConfiguration", "{\"settings\":{}}");
            s.note("workspace/didChangeConfiguration", "{\"settings\":null}");
            s.note("workspace/didChangeConfiguration", "{\"settings\":[]}");
            String all = "{\"textDocument\":{\"uri\":\"" + URI
                    + "\"},\"range\":{\"start\":{\"line\":0,\"character\":0},\"end\":{\"line\":9,\"character\":0}}}";
            assertThat(s.ask("textDocument/inlayHint", all).isJsonArray()).isTrue();
            int before = s.ask("textDocument/codeLens", "{\"textDocument\":{\"uri\":\"" + URI + "\"}}")
                    .getAsJsonArray()
                    .size();
            assertThat(before).isPositive();
            s.note("workspace/didChangeConfiguration", "{\"settings\":{\"backcone\":{\"lens\":false}}}");
            assertThat(s.ask("textDocument/codeLens", "{\"textDocument\":{\"uri\":\"" + URI + "\"}}")
                            .getAsJsonArray())
                    .isEmpty();
        }
    }

    @Test
    void aThousandEditsWithoutWaitingEndWithTheRightFindings() {
        try (Session s = new Session()) {
            s.initialized();
            s.open(URI, SPEC);
            s.diagnostics(URI, 1);
            int version = 1;
            for (int i = 0; i < 500; i++) {
                s.change(URI, ++version, 4, 24, 27, "@");
                s.change(URI, ++version, 4, 24, 25, "900");
            }
            s.change(URI, ++version, 4, 28, 31, "rmp");
            JsonObject last = s.diagnostics(URI, version);
            // held back while it is being typed, then told
            if (!last.toString().contains("BC3002")) {
                last = s.diagnostics(URI, version);
            }
            assertThat(last.toString()).contains("BC3002");
            assertThat(s.count("textDocument/publishDiagnostics")).isLessThan(600);
        }
    }

    @Test
    void everyCancelledRequestIsAnswered() {
        try (Session s = new Session()) {
            s.initialized();
            s.open(URI, SPEC);
            List<Integer> ids = new ArrayList<>();
            for (int i = 0; i < 50; i++) {
                ids.add(s.begin("textDocument/semanticTokens/full", "{\"textDocument\":{\"uri\":\"" + URI + "\"}}"));
            }
            for (int id : ids) {
                s.note("$/cancelRequest", "{\"id\":" + id + "}");
            }
            for (int id : ids) {
                JsonObject a = s.answer(id);
                assertThat(a.has("result")
                                || a.getAsJsonObject("error").get("code").getAsInt() == -32800)
                        .as(a.toString())
                        .isTrue();
            }
            alive(s);
        }
    }

    @Test
    void aLargeTextAndDeepBracketsAreLivedThrough() {
        try (Session s = new Session()) {
            s.initialized();
            StringBuilder b = new StringBuilder();
            while (b.length() < 5_000_000) {
                b.append("x = = { \"open\n");
            }
            s.open("untitled:large.drive", b.toString());
            JsonObject d = s.diagnostics("untitled:large.drive", 1);
            assertThat(d.getAsJsonArray("diagnostics").size()).isLessThanOrEqualTo(Convert.MOST + 1);
            s.open("untitled:deep.drive", "drive d { ".repeat(10_000) + "x = " + "(".repeat(20_000));
            s.diagnostics("untitled:deep.drive", 1);
            s.open(URI, SPEC);
            alive(s);
        }
    }

    @Test
    void placesAreCountedInBytesWhereTheClientWantsIt() {
        String text = "# \u03B2\uD83D\uDE00\ndrive a { let \u03B2_1 = 3 mm; require \u03B2_1 > 2 rmp }\n";
        for (String encoding : List.of("utf-8", "utf-16")) {
            try (Session s = new Session()) {
                s.initialized("{\"capabilities\":{\"general\":{\"positionEncodings\":[\"" + encoding
                        + "\"]},\"textDocument\":{\"publishDiagnostics\":{\"versionSupport\":true}}}}");
                s.open(URI, text);
                JsonObject d = s.diagnostics(URI, 1);
                int start = d.getAsJsonArray("diagnostics")
                        .get(0)
                        .getAsJsonObject()
                        .getAsJsonObject("range")
                        .getAsJsonObject("start")
                        .get("character")
                        .getAsInt();
                String line = text.split("\n")[1];
                int column = line.indexOf("rmp");
                int bytes = line.substring(0, column).getBytes(java.nio.charset.StandardCharsets.UTF_8).length;
                assertThat(start).as(encoding + d).isEqualTo(encoding.equals("utf-8") ? bytes : column);
            }
        }
    }

    @Test
    void randomBytesBetweenMessagesAreSkipped() {
        Random r = new Random(7);
        try (Session s = new Session()) {
            s.initialized();
            s.open(URI, SPEC);
            for (int i = 0; i < 30; i++) {
                StringBuilder b = new StringBuilder();
                for (int k = r.nextInt(60); k > 0; k--) {
                    b.append((char) (' ' + r.nextInt(90)));
                }
                s.raw(b.toString());
                alive(s);
            }
        }
    }
}
