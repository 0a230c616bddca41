use super::*;
use crate::matrix::Dense;
use nalgebra::DMatrix;

fn approximation(complex: bool) -> Approximation {
    let re = DMatrix::from_row_slice(2, 2, &[0.6, 0.8, -0.8, 1.0 / 3.0]);
    let im = DMatrix::from_row_slice(2, 2, &[0.1, -0.2, 5e-324, 0.0]);
    Approximation {
        values: vec![-0.5, 1.0 / 3.0],
        vectors: if complex {
            Dense::complex(re, im)
        } else {
            Dense::real(re)
        },
        scale: 3,
    }
}

fn data<'a>(
    approximation: &'a Approximation,
    enclosures: &'a [ProvenEnds],
    labels: &'a [String],
) -> Data<'a> {
    Data {
        title: "Mast, \"north\"\nside",
        labels,
        approximation,
        residual_bounds: &[],
        tridiagonal: Some((&[0.25, 0.5], &[-0.125])),
        tridiagonal_scale: 3,
        enclosures,
        fingerprint: "ab12",
    }
}

#[test]
fn csv_reads_back_to_the_same_doubles() {
    let approximation = approximation(true);
    let labels = ["a,b".to_owned(), "say \"x\"".to_owned()];
    let text = export(&data(&approximation, &[], &labels), ExportKind::VectorsCsv).text;
    let rows: Vec<&str> = text.split("\r\n").collect();
    assert_eq!(rows[0], "row,v1_re,v1_im,v2_re,v2_im");
    let cells: Vec<f64> = rows[1]
        .strip_prefix("\"a,b\",")
        .expect("the label is quoted")
        .split(',')
        .map(|cell| cell.parse().expect("a number"))
        .collect();
    assert_eq!(cells, [0.6, 0.1, 0.8, -0.2], "{text}");
    assert!(
        rows[2].starts_with("\"say \"\"x\"\"\",-0.8,5e-324,"),
        "{text}"
    );
}

#[test]
fn values_carry_their_scale_and_their_ends() {
    let approximation = approximation(false);
    let ends: Vec<ProvenEnds> = (1..=2)
        .map(|k| ProvenEnds {
            lower: format!("{k}.0"),
            upper: format!("{k}.1"),
            first: k,
            last: k,
        })
        .collect();
    let text = export(&data(&approximation, &ends, &[]), ExportKind::ValuesCsv).text;
    let rows: Vec<&str> = text.split("\r\n").collect();
    assert_eq!(
        rows[0],
        "index,approximate,residual_bound,lower,upper,first,last"
    );
    assert_eq!(rows[1], "1,-4.0,,1.0,1.1,1,1");
    let second: f64 = rows[2]
        .split(',')
        .nth(1)
        .expect("a cell")
        .parse()
        .expect("a number");
    assert_eq!(second, 8.0 / 3.0);
}

#[test]
fn json_reads_back() {
    let approximation = approximation(true);
    let text = export(&data(&approximation, &[], &[]), ExportKind::Json).text;
    let value: serde_json::Value = serde_json::from_str(&text).expect("JSON");
    assert_eq!(value["order"], 2);
    assert_eq!(
        value["eigenvectors"][0][1][1].as_f64(),
        Some(5e-324),
        "{text}"
    );
    assert_eq!(
        value["eigenvalues"][1]["approximate"], "2.6666666666666665",
        "{text}"
    );
    assert_eq!(value["tridiagonal"]["off_diagonal"][0], "-1.0", "{text}");
    assert_eq!(value["title"], "Mast, \"north\"\nside");
}

#[test]
fn matrix_market_is_by_columns_and_on_one_line_each() {
    let approximation = approximation(false);
    let file = export(
        &data(&approximation, &[], &[]),
        ExportKind::VectorsMatrixMarket,
    );
    let body: Vec<&str> = file
        .text
        .lines()
        .filter(|line| !line.starts_with('%'))
        .collect();
    assert_eq!(
        body,
        ["2 2", "0.6", "-0.8", "0.8", "0.3333333333333333"],
        "{}",
        file.text
    );
    assert!(
        file.text
            .starts_with("%%MatrixMarket matrix array real general\n"),
        "{}",
        file.text
    );
    let tridiagonal = export(
        &data(&approximation, &[], &[]),
        ExportKind::TridiagonalMatrixMarket,
    )
    .text;
    let body: Vec<&str> = tridiagonal
        .lines()
        .filter(|line| !line.starts_with('%'))
        .collect();
    assert_eq!(
        body,
        ["2 2 3", "1 1 2.0", "2 1 -1.0", "2 2 4.0"],
        "{tridiagonal}"
    );
}

#[test]
fn file_names_are_safe_everywhere() {
    assert_eq!(
        file_name("Mast: K/M (5×5)", "eigenvalues.csv"),
        "mast-k-m-5-5-eigenvalues.csv"
    );
    assert_eq!(file_name("../..", "eigenvalues.csv"), "eigenvalues.csv");
    assert_eq!(file_name("", "eigenvalues.csv"), "eigenvalues.csv");
}
