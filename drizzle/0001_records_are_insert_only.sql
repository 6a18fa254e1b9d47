-- Rows that are records can be added, never changed or removed, whatever the program above does.
create function refuse_change() returns trigger language plpgsql as $$
begin
  raise exception '% is insert-only', tg_table_name using errcode = 'restrict_violation';
end $$;
--> statement-breakpoint
create trigger readings_insert_only before update or delete on readings for each row execute function refuse_change();
--> statement-breakpoint
create trigger readings_no_truncate before truncate on readings for each statement execute function refuse_change();
--> statement-breakpoint
create trigger calibrations_insert_only before update or delete on calibrations for each row execute function refuse_change();
--> statement-breakpoint
create trigger calibrations_no_truncate before truncate on calibrations for each statement execute function refuse_change();
--> statement-breakpoint
create trigger methods_insert_only before update or delete on methods for each row execute function refuse_change();
--> statement-breakpoint
create trigger methods_no_truncate before truncate on methods for each statement execute function refuse_change();
--> statement-breakpoint
create trigger reference_checks_insert_only before update or delete on reference_checks for each row execute function refuse_change();
--> statement-breakpoint
create trigger reference_checks_no_truncate before truncate on reference_checks for each statement execute function refuse_change();
--> statement-breakpoint
create trigger reviews_insert_only before update or delete on reviews for each row execute function refuse_change();
--> statement-breakpoint
create trigger reviews_no_truncate before truncate on reviews for each statement execute function refuse_change();
--> statement-breakpoint
create trigger adoptions_insert_only before update or delete on adoptions for each row execute function refuse_change();
--> statement-breakpoint
create trigger adoptions_no_truncate before truncate on adoptions for each statement execute function refuse_change();
--> statement-breakpoint
create trigger certificate_documents_insert_only before update or delete on certificate_documents for each row execute function refuse_change();
--> statement-breakpoint
create trigger certificate_documents_no_truncate before truncate on certificate_documents for each statement execute function refuse_change();
--> statement-breakpoint
create trigger record_entries_insert_only before update or delete on record_entries for each row execute function refuse_change();
--> statement-breakpoint
create trigger record_entries_no_truncate before truncate on record_entries for each statement execute function refuse_change();
--> statement-breakpoint
create trigger answered_requests_insert_only before update or delete on answered_requests for each row execute function refuse_change();
--> statement-breakpoint
create trigger answered_requests_no_truncate before truncate on answered_requests for each statement execute function refuse_change();
--> statement-breakpoint
-- A fit's outcome is written once.
create function refuse_second_outcome() returns trigger language plpgsql as $$
begin
  if old.state in ('done', 'failed') then
    raise exception 'fit % has its outcome already', old.id using errcode = 'restrict_violation';
  end if;
  return new;
end $$;
--> statement-breakpoint
create trigger fits_written_once before update on fits for each row execute function refuse_second_outcome();
--> statement-breakpoint
create trigger fits_kept before delete or truncate on fits for each statement execute function refuse_change();
--> statement-breakpoint
-- A certificate that left the house changes only in what became of it.
create function refuse_certificate_edit() returns trigger language plpgsql as $$
declare
  free text[] := array['state', 'version', 'withdrawn_at', 'withdrawal_reason'];
begin
  if old.state = 'draft' then
    if tg_op = 'DELETE' then return old; end if;
    return new;
  end if;
  if tg_op = 'DELETE' or new.state = 'draft' or (to_jsonb(new) - free) is distinct from (to_jsonb(old) - free) then
    raise exception 'certificate % issue % was released and cannot be edited', old.number, old.issue using errcode = 'restrict_violation';
  end if;
  return new;
end $$;
--> statement-breakpoint
create trigger certificates_not_edited before update or delete on certificates for each row execute function refuse_certificate_edit();
--> statement-breakpoint
-- An accepted determination can only be superseded.
create function refuse_determination_edit() returns trigger language plpgsql as $$
declare
  free text[] := array['state', 'version'];
begin
  if old.state in ('accepted', 'superseded')
    and (new.state not in ('accepted', 'superseded') or (to_jsonb(new) - free) is distinct from (to_jsonb(old) - free)) then
    raise exception 'determination % was accepted and cannot be edited', old.id using errcode = 'restrict_violation';
  end if;
  return new;
end $$;
--> statement-breakpoint
create trigger determinations_not_edited before update on determinations for each row execute function refuse_determination_edit();
--> statement-breakpoint
create trigger determinations_kept before delete or truncate on determinations for each statement execute function refuse_change();
