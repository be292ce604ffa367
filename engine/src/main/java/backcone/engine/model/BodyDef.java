package backcone.engine.model;

import backcone.engine.syntax.Entry;
import backcone.engine.text.FileId;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/** The body of a kind, a chapter, a method or an {@code each}: what it declares, in text order. */
public final class BodyDef {
    public final String owner;
    public final FileId file;
    public final List<Decl> decls = new ArrayList<>();
    public final List<RelationDef> relations = new ArrayList<>();
    public final List<LimitDef> limits = new ArrayList<>();
    public final List<Entry.Applies> applies = new ArrayList<>();
    public final Map<String, TableDef> tables = new LinkedHashMap<>();
    public final List<Entry.Parts> parts = new ArrayList<>();
    public final List<Entry.Part> part = new ArrayList<>();
    public final List<Entry.Role> roles = new ArrayList<>();
    public final List<Entry.Collect> collects = new ArrayList<>();
    public final List<Entry.Cases> cases = new ArrayList<>();
    public final Map<String, List<BodyDef>> each = new LinkedHashMap<>();
    public final List<Entry.Example> examples = new ArrayList<>();
    public final List<String> editions = new ArrayList<>();
    public final List<Entry.Include> includes = new ArrayList<>();

    public BodyDef(String owner, FileId file) {
        this.owner = owner;
        this.file = file;
    }

    /** A relation, stated alone or attached to a declaration. */
    public record RelationDef(Entry.Relation syntax, FileId file, String owner) {}

    /** A limit and whether it belongs to a method (results outside) or to the geometry (a warning). */
    public record LimitDef(Entry.Limit syntax, FileId file, String owner, boolean ofMethod) {}
}
