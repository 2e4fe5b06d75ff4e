-- What analysts read. {fields} stands for the texts and ratings of fields.def but name and maker,
-- each as p.COLUMN.

DROP VIEW IF EXISTS ratings;
CREATE VIEW ratings AS
SELECT p.name AS part, p.maker, p.polarity, {fields}, p.rdson,
  p.number AS revision, p.entry, e.author, e.time,
  coalesce((SELECT CASE r.verdict WHEN 'accept' THEN 'accepted' ELSE 'questioned' END
    FROM review r WHERE r.part = p.id AND r.number = p.number ORDER BY r.entry DESC LIMIT 1),
    'unreviewed') AS review
FROM part p JOIN entry e ON e.id = p.entry
WHERE p.withdrawn = 0;

DROP VIEW IF EXISTS rdson_points;
CREATE VIEW rdson_points AS
SELECT p.name AS part, p.maker,
  json_extract(j.value, '$[0]') AS vgs_V, json_extract(j.value, '$[1]') AS rdson_ohm
FROM part p, json_each(p.rdson) j
WHERE p.withdrawn = 0;

DROP VIEW IF EXISTS soa_points;
CREATE VIEW soa_points AS
SELECT p.name AS part, p.maker, json_extract(l.value, '$[0]') AS case_degC,
  CASE json_extract(l.value, '$[1]') WHEN 'dc' THEN 9e999 ELSE json_extract(l.value, '$[1]') END AS pulse_s,
  json_extract(j.value, '$[0]') AS vds_V, json_extract(j.value, '$[1]') AS id_A
FROM part p JOIN curve_json c ON c.id = p.curves,
  json_each(c.json, '$.soa') l, json_each(l.value, '$[2]') j
WHERE p.withdrawn = 0;

DROP VIEW IF EXISTS zth_points;
CREATE VIEW zth_points AS
SELECT p.name AS part, p.maker, 'case' AS path,
  json_extract(j.value, '$[0]') AS time_s, json_extract(j.value, '$[1]') AS zth_KpW
FROM part p JOIN curve_json c ON c.id = p.curves, json_each(c.json, '$.zth_case') j
WHERE p.withdrawn = 0
UNION ALL
SELECT p.name, p.maker, 'ambient', json_extract(j.value, '$[0]'), json_extract(j.value, '$[1]')
FROM part p JOIN curve_json c ON c.id = p.curves, json_each(c.json, '$.zth_ambient') j
WHERE p.withdrawn = 0;

DROP VIEW IF EXISTS foster_pairs;
CREATE VIEW foster_pairs AS
SELECT p.name AS part, p.maker, 'case' AS path,
  json_extract(j.value, '$[0]') AS r_KpW, json_extract(j.value, '$[1]') AS tau_s
FROM part p JOIN curve_json c ON c.id = p.curves, json_each(c.json, '$.foster_case') j
WHERE p.withdrawn = 0
UNION ALL
SELECT p.name, p.maker, 'ambient', json_extract(j.value, '$[0]'), json_extract(j.value, '$[1]')
FROM part p JOIN curve_json c ON c.id = p.curves, json_each(c.json, '$.foster_ambient') j
WHERE p.withdrawn = 0;

DROP VIEW IF EXISTS history;
CREATE VIEW history AS
SELECT p.name AS part, p.maker, p.number AS revision, p.entry, e.kind, e.author, e.time, e.why,
  p.withdrawn, p.polarity, {fields}, p.rdson, (SELECT json FROM curve_json WHERE id = p.curves) AS curves
FROM part p JOIN entry e ON e.id = p.entry
UNION ALL
SELECT p.name, p.maker, p.number, p.entry, e.kind, e.author, e.time, e.why,
  p.withdrawn, p.polarity, {fields}, p.rdson, (SELECT json FROM curve_json WHERE id = p.curves)
FROM past p JOIN entry e ON e.id = p.entry;

DROP VIEW IF EXISTS log;
CREATE VIEW log AS
SELECT e.id AS entry, e.kind, e.author, e.time, e.why, e.undoes,
  (SELECT group_concat(s.name, ', ') FROM source s WHERE s.entry = e.id) AS files,
  (SELECT name FROM part WHERE id = r.part) AS reviewed_part, r.number AS reviewed_revision, r.verdict,
  lower(hex(e.hash)) AS hash
FROM entry e LEFT JOIN review r ON r.entry = e.id;
