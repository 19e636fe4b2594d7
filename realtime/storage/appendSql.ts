/**
 * The flush: everything of a batch in one statement and so in one transaction (rules S1, A2, D6).
 *
 * `allowed` is the last gate: rows of people who may not edit the page at this moment, rows for another epoch and rows for
 * an archived page are not in it, and then nothing is written at all. A client id that somebody else took meanwhile
 * violates a key and fails the statement.
 */
export const APPEND_SQL = `
with input as (
  select * from unnest($1::uuid[], $2::int[], $3::uuid[], $4::bytea[]) with ordinality as t(page_id, epoch, user_id, bytes, ord)
), allowed as (
  select i.ord from input i
  join pages p on p.id = i.page_id and p.epoch = i.epoch and p.archived_at is null
  join memberships m on m.group_id = p.group_id and m.user_id = i.user_id and m.role::text = any($5::text[])
), gate as (
  select (select count(*) from allowed) = (select count(*) from input) as open
), written as (
  insert into page_updates (page_id, epoch, user_id, "update")
  select i.page_id, i.epoch, i.user_id, i.bytes from input i, gate where gate.open order by i.ord
  returning seq
), owned as (
  insert into page_clients (page_id, client_id, user_id)
  select c.page_id, c.client_id, c.user_id from unnest($6::uuid[], $7::bigint[], $8::uuid[]) as c(page_id, client_id, user_id), gate where gate.open
), recorded as (
  insert into amendment_log (page_id, block_key, list, entry_key, before, after, reason, user_id)
  select r.page_id, r.block_key, r.list, r.entry_key, r.before, r.after, coalesce(r.after, r.before) ->> 'reason', r.user_id
  from jsonb_to_recordset($9::jsonb) as r(page_id uuid, block_key text, list text, entry_key text, before jsonb, after jsonb, user_id uuid), gate where gate.open
), touched as (
  update pages p set
    title = coalesce(t.title, p.title), outline = coalesce(t.outline, p.outline), changed_by = t.user_id, changed_at = now()
  from jsonb_to_recordset($10::jsonb) as t(page_id uuid, title text, outline jsonb, user_id uuid), gate
  where gate.open and p.id = t.page_id
)
select (select array_agg(ord::int) from allowed) as allowed, (select array_agg(seq::text order by seq) from written) as seqs`;
