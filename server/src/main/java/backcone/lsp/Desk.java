package backcone.lsp;

import backcone.engine.Analysis;
import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.io.PrintStream;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.LocalDate;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Deque;
import java.util.HashMap;
import java.util.HashSet;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.ConcurrentHashMap;
import java.util.concurrent.Executors;
import java.util.concurrent.ScheduledExecutorService;
import java.util.concurrent.TimeUnit;
import java.util.function.Function;
import org.eclipse.lsp4j.PublishDiagnosticsParams;
import org.eclipse.lsp4j.jsonrpc.ResponseErrorException;
import org.eclipse.lsp4j.jsonrpc.messages.ResponseError;
import org.eclipse.lsp4j.jsonrpc.messages.ResponseErrorCode;
import org.eclipse.lsp4j.services.LanguageClient;
import org.jspecify.annotations.Nullable;

/**
 * The open texts and who works on them. The reading thread changes texts; one thread looks for findings, always in the newest
 * version, and publishes them; another answers questions about the version at which they were asked.
 */
final class Desk {
    /** How long a finding about the word being typed waits. */
    static final long HOLD_MILLIS = 300;

    private final PrintStream log;
    private final Map<String, Doc> docs = new ConcurrentHashMap<>();
    private final List<Folder> folders = new ArrayList<>();
    private final Map<Path, Folder> loose = new HashMap<>();
    private final Object lock = new Object();
    private final Set<Doc> dirty = new LinkedHashSet<>();
    private final Deque<Runnable> later = new ArrayDeque<>();

    /** What files that are not open rest on, and whether something was published for them. */
    private final Map<String, Closed> closed = new ConcurrentHashMap<>();

    private final ScheduledExecutorService answers = Executors.newSingleThreadScheduledExecutor(r -> {
        Thread t = new Thread(null, r, "answers", 16 << 20);
        t.setDaemon(true);
        return t;
    });
    final HandbookFiles handbook = new HandbookFiles();
    volatile @Nullable LanguageClient client;
    volatile Settings settings = Settings.USUAL;
    volatile Client can = Client.NOTHING;
    private final LocalDate today;
    volatile boolean ended;

    private record Closed(Folder folder, FileId id, Set<FileId> uses, boolean told) {}

    Desk(PrintStream log, LocalDate today) {
        this.log = log;
        this.today = today;
        Thread t = new Thread(null, this::findings, "findings", 16 << 20);
        t.setDaemon(true);
        t.start();
    }

    // ---- folders and texts, on the reading thread

    synchronized void add(Path root) {
        for (Folder f : folders) {
            if (f.root.equals(root)) {
                return;
            }
        }
        folders.add(new Folder(root, today));
    }

    synchronized void remove(Path root) {
        folders.removeIf(f -> f.root.equals(root));
    }

    synchronized List<Folder> folders() {
        return List.copyOf(folders);
    }

    private synchronized Folder folderOf(@Nullable Path file) {
        Folder best = null;
        if (file != null) {
            for (Folder f : folders) {
                if (f.holds(file) && (best == null || f.root.getNameCount() > best.root.getNameCount())) {
                    best = f;
                }
            }
        }
        if (best != null) {
            return best;
        }
        // a file of no opened folder: the folder of its repository, else its own
        Path home = file == null || file.getParent() == null ? Path.of("").toAbsolutePath() : file.getParent();
        Path root = home;
        for (Path p = home; p != null; p = p.getParent()) {
            if (Files.exists(p.resolve(".git"))) {
                root = p;
                break;
            }
        }
        return loose.computeIfAbsent(root, r -> new Folder(r, today));
    }

    void open(String uri, int version, String text) {
        Path path = Uris.path(uri);
        FileId book = path == null ? null : handbook.id(path);
        Folder f = folderOf(book == null ? path : null);
        FileId id = book != null ? book : path == null ? new FileId(untitled(uri)) : f.id(path);
        Doc d = new Doc(uri, f, id, version, text, can.utf8());
        docs.put(uri, d);
        if (book == null) {
            f.opened(d);
        }
        closed.remove(uri);
        work(d);
        if (book == null) {
            dependents(f, id, d);
        }
    }

    private static String untitled(String uri) {
        String name = uri.replaceAll("[^A-Za-z0-9._-]", "_");
        return name.endsWith(".method") || name.endsWith(".drive") ? name : name + ".drive";
    }

    @Nullable
    Doc doc(String uri) {
        return docs.get(uri);
    }

    /** The text of a document after a change. */
    void change(Doc d, int version, String text, int typedAt) {
        d.typedAt = typedAt;
        d.typedWhen = System.nanoTime();
        d.now = new Doc.Snapshot(d, version, text, new Lines(text, can.utf8()));
        work(d);
    }

    void close(String uri) {
        Doc d = docs.remove(uri);
        if (d == null) {
            return;
        }
        synchronized (lock) {
            dirty.remove(d);
        }
        if (!d.id.isHandbook()) {
            d.folder.closed(d);
            Path path = Uris.path(uri);
            boolean exists = path != null && Files.exists(path);
            publish(uri, null, List.of(), new Lines("", false), d.folder);
            if (exists) {
                later(() -> closedFile(d.folder, d.id));
            }
            dependents(d.folder, d.id, null);
        }
    }

    void saved(String uri) {
        Doc d = docs.get(uri);
        if (d != null) {
            d.typedAt = -1;
            work(d);
        }
    }

    /** A file on disk has come, changed or gone. */
    void changedOnDisk(String uri) {
        Path path = Uris.path(uri);
        if (path == null) {
            return;
        }
        Folder f = folderOf(path);
        String name = path.getFileName() == null ? "" : path.getFileName().toString();
        if (name.equals(backcone.engine.diagnostics.House.NAME)) {
            f.readHouse();
            docs.values().forEach(this::work);
            return;
        }
        FileId id = f.id(path);
        if (f.isOpen(id)) {
            return; // the editor's text counts
        }
        f.forget(id);
        if (Files.exists(path)) {
            later(() -> closedFile(f, id));
        } else {
            closed.remove(uri);
            publish(uri, null, List.of(), new Lines("", false), f);
        }
        dependents(f, id, null);
    }

    /** Whoever uses a file is looked at again, open or not. */
    private void dependents(Folder f, FileId id, @Nullable Doc but) {
        for (Doc d : docs.values()) {
            if (d != but && d.folder == f && !d.id.isHandbook()) {
                work(d);
            }
        }
        for (Closed c : closed.values()) {
            if (c.folder == f && c.uses.contains(id)) {
                later(() -> closedFile(f, c.id));
            }
        }
    }

    // ---- findings

    private void work(Doc d) {
        synchronized (lock) {
            dirty.add(d);
            lock.notifyAll();
        }
    }

    void later(Runnable r) {
        synchronized (lock) {
            later.add(r);
            lock.notifyAll();
        }
    }

    /** Waits until everything asked so far is answered. */
    void drain() {
        CompletableFuture<Void> a = new CompletableFuture<>();
        CompletableFuture<Void> b = new CompletableFuture<>();
        later(() -> a.complete(null));
        answers.execute(() -> b.complete(null));
        try {
            a.get(20, TimeUnit.SECONDS);
            b.get(20, TimeUnit.SECONDS);
        } catch (Exception e) {
            fault(e);
        }
    }

    private void findings() {
        while (true) {
            Doc d = null;
            Runnable r = null;
            synchronized (lock) {
                while (dirty.isEmpty() && later.isEmpty()) {
                    try {
                        lock.wait();
                    } catch (InterruptedException e) {
                        return;
                    }
                }
                if (!dirty.isEmpty()) {
                    d = dirty.iterator().next();
                    dirty.remove(d);
                } else {
                    r = later.poll();
                }
            }
            try {
                if (d != null) {
                    look(d, true);
                } else if (r != null) {
                    r.run();
                }
            } catch (Throwable e) {
                fault(e);
            }
        }
    }

    void fault(Throwable e) {
        log.println("backcone: " + e);
        StackTraceElement[] at = e.getStackTrace();
        for (int i = 0; i < Math.min(at.length, 12); i++) {
            log.println("    at " + at[i]);
        }
    }

    private void look(Doc d, boolean hold) {
        Doc.Snapshot s = d.now;
        Analysis before = d.whole();
        Analysis a = d.analysis(s);
        if (d.now != s || docs.get(d.uri) != d) {
            return; // a newer version is on its way
        }
        List<Diagnostic> all = findings(d, a, before);
        List<Diagnostic> shown = hold ? heldBack(d, s, all) : all;
        d.published = shown;
        publish(d.uri, s.version(), shown, s.lines(), d.folder);
        if (shown.size() < all.size()) {
            answers.schedule(
                    () -> {
                        if (d.now == s) {
                            later(() -> {
                                if (d.now == s && docs.get(d.uri) == d) {
                                    d.published = all;
                                    publish(d.uri, s.version(), all, s.lines(), d.folder);
                                }
                            });
                        }
                    },
                    HOLD_MILLIS,
                    TimeUnit.MILLISECONDS);
        }
    }

    /** All findings of a version; while a line can't be read, results stay as they were before, and say so. */
    List<Diagnostic> findings(Doc d, Analysis a, @Nullable Analysis before) {
        List<Diagnostic> own = new ArrayList<>();
        for (Diagnostic x : a.diagnostics()) {
            own.add(d.folder.house.of(x));
        }
        if (!Stale.isBroken(a)) {
            d.whole(a);
            return own;
        }
        if (before == null) {
            return own;
        }
        List<Diagnostic> out = new ArrayList<>();
        for (Diagnostic x : own) {
            if (!Stale.isResult(x.code())) {
                out.add(x);
            }
        }
        for (Diagnostic x : Stale.moved(before, a)) {
            out.add(d.folder.house.of(x));
        }
        out.sort(java.util.Comparator.comparingInt(x -> x.span().start()));
        return out;
    }

    /** Leaves out what is new and about the word being typed. */
    private static List<Diagnostic> heldBack(Doc d, Doc.Snapshot s, List<Diagnostic> all) {
        int at = d.typedAt;
        if (at < 0 || System.nanoTime() - d.typedWhen > HOLD_MILLIS * 1_000_000) {
            return all;
        }
        Span word = Doc.wordAt(s.text(), at);
        Set<Code> before = new HashSet<>();
        int line = s.lines().line(Math.min(at, s.text().length()));
        for (Diagnostic x : d.published) {
            before.add(x.code());
        }
        List<Diagnostic> out = new ArrayList<>();
        for (Diagnostic x : all) {
            boolean touches = x.span().start() <= word.end()
                    && x.span().end() >= word.start()
                    && s.lines().line(Math.min(x.span().start(), s.text().length())) == line;
            if (touches && Stale.flickers(x.code()) && !before.contains(x.code())) {
                continue;
            }
            out.add(x);
        }
        return out;
    }

    void publish(String uri, @Nullable Integer version, List<Diagnostic> all, Lines lines, Folder folder) {
        LanguageClient c = client;
        if (c == null || can.pullOnly()) {
            return;
        }
        PublishDiagnosticsParams p = new PublishDiagnosticsParams();
        p.setUri(uri);
        if (can.versions()) {
            p.setVersion(version);
        }
        p.setDiagnostics(new Convert(this, folder).diagnostics(all, lines));
        c.publishDiagnostics(p);
    }

    // ---- files that are not open

    void closedFile(Folder f, FileId id) {
        if (f.isOpen(id)) {
            return;
        }
        Analysis a = f.analyse(id);
        List<Diagnostic> shown = new ArrayList<>();
        for (Diagnostic x : a.diagnostics()) {
            shown.add(f.house.of(x));
        }
        String uri = Uris.uri(f.path(id));
        Closed before = closed.get(uri);
        closed.put(uri, new Closed(f, id, Set.copyOf(a.uses()), !shown.isEmpty()));
        if (!shown.isEmpty() || (before != null && before.told)) {
            publish(uri, null, shown, new Lines(a.text(), can.utf8()), f);
        }
    }

    /** Files of a folder that are known to use this one. */
    List<FileId> users(Folder f, FileId id) {
        List<FileId> out = new ArrayList<>();
        for (Closed c : closed.values()) {
            if (c.folder == f && c.uses.contains(id)) {
                out.add(c.id);
            }
        }
        for (Doc d : docs.values()) {
            if (d.folder == f && !d.id.equals(id) && !out.contains(d.id)) {
                out.add(d.id);
            }
        }
        return out;
    }

    List<Doc> all() {
        return List.copyOf(docs.values());
    }

    // ---- questions

    /** Answers a question about the present version of a text, on the thread for answers. */
    <T> CompletableFuture<@Nullable T> ask(String uri, Function<Asked, @Nullable T> question) {
        Doc d = docs.get(uri);
        if (d == null) {
            return CompletableFuture.completedFuture(null);
        }
        Doc.Snapshot s = d.now;
        CompletableFuture<@Nullable T> out = new CompletableFuture<>();
        answers.execute(() -> {
            if (out.isCancelled()) {
                return;
            }
            try {
                out.complete(question.apply(new Asked(this, d, s, d.analysis(s))));
            } catch (ResponseErrorException e) {
                out.completeExceptionally(e);
            } catch (Throwable e) {
                fault(e);
                out.completeExceptionally(new ResponseErrorException(new ResponseError(
                        ResponseErrorCode.InternalError, "The server met a fault of its own.", null)));
            }
        });
        return out;
    }

    <T> CompletableFuture<@Nullable T> soon(java.util.function.Supplier<@Nullable T> question) {
        CompletableFuture<@Nullable T> out = new CompletableFuture<>();
        answers.execute(() -> {
            if (out.isCancelled()) {
                return;
            }
            try {
                out.complete(question.get());
            } catch (ResponseErrorException e) {
                out.completeExceptionally(e);
            } catch (Throwable e) {
                fault(e);
                out.completeExceptionally(new ResponseErrorException(new ResponseError(
                        ResponseErrorCode.InternalError, "The server met a fault of its own.", null)));
            }
        });
        return out;
    }

    /** A text with its analysis, as a question meets it. */
    record Asked(Desk desk, Doc doc, Doc.Snapshot snapshot, Analysis analysis) {
        Convert convert() {
            return new Convert(desk, doc.folder);
        }

        Lines lines() {
            return snapshot.lines();
        }
    }

    /** Lines of any file of a folder; those of open ones as they are now. */
    Lines lines(Folder f, FileId id) {
        Doc d = f.doc(id);
        if (d != null) {
            return d.now.lines();
        }
        if (id.isHandbook()) {
            synchronized (books) {
                return books.computeIfAbsent(id, k -> {
                    String t = f.text(k);
                    return new Lines(t == null ? "" : t, can.utf8());
                });
            }
        }
        String t = f.text(id);
        return new Lines(t == null ? "" : t, can.utf8());
    }

    private final Map<FileId, Lines> books = new LinkedHashMap<>();

    String uri(Folder f, FileId id) {
        Doc d = f.doc(id);
        return d != null ? d.uri : id.isHandbook() ? handbook.uri(id) : Uris.uri(f.path(id));
    }
}
