package backcone.lsp;

import static org.assertj.core.api.Assertions.assertThat;

import com.google.gson.JsonElement;
import com.google.gson.JsonObject;
import com.google.gson.JsonParser;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.InputStream;
import java.io.OutputStream;
import java.io.PipedInputStream;
import java.io.PipedOutputStream;
import java.io.PrintStream;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.concurrent.CountDownLatch;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.atomic.AtomicInteger;
import java.util.function.Predicate;

/** A client that speaks to a server in this process, bytes and all. */
final class Session implements AutoCloseable {
    private final OutputStream toServer;
    final ByteArrayOutputStream log = new ByteArrayOutputStream();
    private final Map<String, JsonObject> answers = new HashMap<>();
    private final List<JsonObject> notes = new ArrayList<>();
    final AtomicInteger status = new AtomicInteger(-1);
    private final CountDownLatch ended = new CountDownLatch(1);
    private int ids;

    Session() {
        try {
            PipedInputStream serverIn = new PipedInputStream(1 << 20);
            toServer = new PipedOutputStream(serverIn);
            PipedInputStream fromServer = new PipedInputStream(1 << 22);
            OutputStream serverOut = new PipedOutputStream(fromServer);
            Thread server = new Thread(() -> {
                int s = ServerMain.serve(serverIn, serverOut, new PrintStream(log, true, StandardCharsets.UTF_8), x -> {
                    status.compareAndSet(-1, x);
                    ended.countDown();
                });
                status.compareAndSet(-1, s);
                ended.countDown();
                try {
                    serverOut.close();
                } catch (IOException e) {
                    // it has gone
                }
            });
            server.setDaemon(true);
            server.start();
            Thread reader = new Thread(() -> read(fromServer));
            reader.setDaemon(true);
            reader.start();
        } catch (IOException e) {
            throw new AssertionError(e);
        }
    }

    private void read(InputStream in) {
        try {
            while (true) {
                StringBuilder header = new StringBuilder();
                while (header.length() < 4
                        || !header.substring(header.length() - 4).equals("\r\n\r\n")) {
                    int c = in.read();
                    if (c < 0) {
                        return;
                    }
                    header.append((char) c);
                }
                int n = Integer.parseInt(header.toString()
                        .toLowerCase(java.util.Locale.ROOT)
                        .replaceAll("(?s).*content-length: *(\\d+).*", "$1"));
                JsonObject m = JsonParser.parseString(new String(in.readNBytes(n), StandardCharsets.UTF_8))
                        .getAsJsonObject();
                synchronized (this) {
                    if (m.has("id") && !m.has("method")) {
                        answers.put(m.get("id").toString(), m);
                    } else {
                        notes.add(m);
                    }
                    notifyAll();
                }
            }
        } catch (IOException e) {
            // the end
        }
    }

    void raw(String bytes) {
        try {
            toServer.write(bytes.getBytes(StandardCharsets.UTF_8));
            toServer.flush();
        } catch (IOException e) {
            throw new AssertionError(e);
        }
    }

    void send(String json) {
        raw("Content-Length: " + json.getBytes(StandardCharsets.UTF_8).length + "\r\n\r\n" + json);
    }

    void note(String method, String params) {
        send("{\"jsonrpc\":\"2.0\",\"method\":\"" + method + "\",\"params\":" + params + "}");
    }

    int begin(String method, String params) {
        int id = ++ids;
        send("{\"jsonrpc\":\"2.0\",\"id\":" + id + ",\"method\":\"" + method + "\",\"params\":" + params + "}");
        return id;
    }

    JsonObject answer(Object id) {
        String key = String.valueOf(id);
        long end = System.nanoTime() + TimeUnit.SECONDS.toNanos(60);
        synchronized (this) {
            while (!answers.containsKey(key)) {
                waitUntil(end, "no answer to " + key);
            }
            return answers.remove(key);
        }
    }

    private void waitUntil(long end, String what) {
        long left = TimeUnit.NANOSECONDS.toMillis(end - System.nanoTime());
        assertThat(left).as(what + "\n" + log.toString(StandardCharsets.UTF_8)).isPositive();
        try {
            wait(Math.min(left, 500));
        } catch (InterruptedException e) {
            throw new AssertionError(e);
        }
    }

    JsonElement ask(String method, String params) {
        JsonObject a = answer(begin(method, params));
        assertThat(a.has("error")).as(a.toString()).isFalse();
        return a.get("result");
    }

    int error(String method, String params) {
        JsonObject a = answer(begin(method, params));
        assertThat(a.has("error")).as(a.toString()).isTrue();
        return a.getAsJsonObject("error").get("code").getAsInt();
    }

    /** Waits for a notification. */
    JsonObject heard(String method, Predicate<JsonObject> which) {
        long end = System.nanoTime() + TimeUnit.SECONDS.toNanos(60);
        synchronized (this) {
            while (true) {
                for (JsonObject n : notes) {
                    if (n.get("method").getAsString().equals(method) && which.test(n.getAsJsonObject("params"))) {
                        notes.remove(n);
                        return n.getAsJsonObject("params");
                    }
                }
                waitUntil(end, "no " + method);
            }
        }
    }

    synchronized int count(String method) {
        return (int) notes.stream()
                .filter(n -> n.get("method").getAsString().equals(method))
                .count();
    }

    Session initialized() {
        return initialized("{\"capabilities\":{\"textDocument\":{\"publishDiagnostics\":{\"versionSupport\":true,"
                + "\"relatedInformation\":true}}}}");
    }

    Session initialized(String params) {
        ask("initialize", params);
        note("initialized", "{}");
        return this;
    }

    static String quoted(String s) {
        return new com.google.gson.JsonPrimitive(s).toString();
    }

    void open(String uri, String text) {
        note(
                "textDocument/didOpen",
                "{\"textDocument\":{\"uri\":" + quoted(uri) + ",\"languageId\":\"backcone\",\"version\":1,\"text\":"
                        + quoted(text) + "}}");
    }

    void change(String uri, int version, int line, int from, int to, String with) {
        note(
                "textDocument/didChange",
                "{\"textDocument\":{\"uri\":" + quoted(uri) + ",\"version\":" + version
                        + "},\"contentChanges\":[{\"range\":{\"start\":{\"line\":" + line + ",\"character\":" + from
                        + "},\"end\":{\"line\":" + line + ",\"character\":" + to + "}},\"text\":" + quoted(with)
                        + "}]}");
    }

    JsonObject diagnostics(String uri, int version) {
        return heard(
                "textDocument/publishDiagnostics",
                p -> p.get("uri").getAsString().equals(uri)
                        && p.has("version")
                        && p.get("version").getAsInt() == version);
    }

    int end() {
        try {
            assertThat(ended.await(30, TimeUnit.SECONDS)).isTrue();
        } catch (InterruptedException e) {
            throw new AssertionError(e);
        }
        return status.get();
    }

    static String at(String uri, int line, int character) {
        return "{\"textDocument\":{\"uri\":" + quoted(uri) + "},\"position\":{\"line\":" + line + ",\"character\":"
                + character + "}}";
    }

    @Override
    public void close() {
        try {
            toServer.close();
        } catch (IOException e) {
            // it has gone
        }
    }
}
