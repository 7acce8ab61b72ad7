-- Lists page by key, newest first, and stop at the page's end. Where a filter is rare, reading back from the newest row
-- until a page is full means reading the whole table; these give such filters their own order.

create index samples_by_state on samples (state, id desc); -- the register, by state
create index batches_by_method on batches (method_id, id desc); -- the list of one method
create index results_by_state on results (state, id desc); -- what waits for review; what was set aside
create index results_by_method on results (method_id, id desc); -- one method's results
create index results_above on results (id desc) where verdict in ('above', 'conditional-above'); -- the few that matter most
create index history_by_table on history (thing, at desc, id desc); -- the history of one kind of thing

-- Numbers are found by how they begin; the unique indexes order by the database's collation, which LIKE cannot use.
create index samples_number_begins on samples (number text_pattern_ops);
create index certificates_number_begins on certificates (number text_pattern_ops);
